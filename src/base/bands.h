/* The 21 third-octave bands from 50 to 5000 Hz, nominal centre frequencies (ISO 266). */
#ifndef BASE_BANDS_H
#define BASE_BANDS_H

enum {
  BANDS = 21,
  BAND_80 = 2,
  BAND_100 = 3,
  BAND_125 = 4,
  BAND_500 = 10,
  BAND_3150 = 18,
  BAND_4000 = 19
};

extern const double bands_hz[BANDS];

#endif
