/* Time that goes by, for limits that a user sets. No answer depends on it otherwise. */
#ifndef BASE_CLOCK_H
#define BASE_CLOCK_H

/* Seconds since some moment in the past that stays the same while the program runs; never goes
 * back. */
double clock_seconds(void);

#endif
