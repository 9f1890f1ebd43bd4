/* The only place that knows units. SI inside: m, kg, s, Pa, N, Hz. */
#ifndef BASE_UNITS_H
#define BASE_UNITS_H

#include <stdbool.h>

#include "base/text.h"

#define UNITS_M_PER_IN      0.0254          /* exact: international inch */
#define UNITS_M_PER_FT      0.3048          /* exact */
#define UNITS_M2_PER_FT2    0.09290304      /* exact */
#define UNITS_KG_PER_LB     0.45359237      /* exact */
#define UNITS_N_PER_LBF     4.4482216152605 /* exact product of pound and standard gravity */
#define UNITS_PA_PER_PSF    47.88025898     /* lbf per ft2 */
#define UNITS_KG_M2_PER_PSF 4.882427636     /* lb per ft2 */
#define UNITS_GRAVITY       9.80665

typedef enum units_system { UNITS_US, UNITS_SI } units_system;

/* Reads a length: `16in`, `5/8in`, `3-5/8in`, `9ft-6in`, `9'-6"`, `9ft 6in`, `3.6 m`, `610mm`, `61
 * cm`. A bare number takes `default_unit_m` metres (0 = refused). Blanks free. True and *metres
 * set, else false and *expected names what is wanted. */
bool units_parse_length(const char *s, double default_unit_m, double *metres,
                        const char **expected);

/* `value` of a named unit of length in metres: "m", "cm", "mm", "in", "ft". False for other names.
 */
bool units_to_metres(const char *unit, double value, double *metres);

/* Printing. US: to 1/16 in (thickness `4-7/8 in`), feet-inches (`9 ft 6 in`); SI: mm (`123.8 mm`)
 * or m (`3.60 m`). */
void units_put_thickness(text *out, double metres, units_system u);
void units_put_height(text *out, double metres, units_system u);
/* mass per area: kg/m2 or psf, one decimal. */
void units_put_surface_mass(text *out, double kg_m2, units_system u);

#endif
