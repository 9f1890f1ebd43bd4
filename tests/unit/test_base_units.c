/* Units: what people write for lengths, and how lengths and masses are printed. Factors: NIST SP
 * 811 appendix B (inch and foot 0.0254 m and 0.3048 m, pound 0.45359237 kg, all exact). */
#include "base/units.h"

#include <check.h>
#include <math.h>
#include <stdlib.h>

#include "base/bands.h"

#define LENGTH_M     1e-15 /* one rounding of a sum of a few metres */
#define FACTOR_SHARE 1e-9  /* the header gives ten digits */

static jmp_buf out_of_memory;
static arena *memory;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
}
static void teardown(void) {
  arena_free(memory);
}

static const struct length_row {
  const char *written;
  double unit_m; /* of a bare number; 0 = refused */
  double metres; /* below 0 = refused */
} length_rows[] = {
    {"16in", 0, 0.4064},
    {"12in", 0, 0.3048},
    {"24 inches", 0, 0.6096},
    {"1 inch", 0, 0.0254},
    {"5/8in", 0, 0.015875},
    {"3-5/8in", 0, 0.092075},
    {"3 5/8 in", 0, 0.092075},
    {"3-5/8\"", 0, 0.092075},
    {" 2 - 1/2 in ", 0, 0.0635},
    {"4.875in", 0, 0.123825},
    {"9ft", 0, 2.7432},
    {"9ft-6in", 0, 2.8956},
    {"9ft 6in", 0, 2.8956},
    {"9'-6\"", 0, 2.8956},
    {"9'6\"", 0, 2.8956},
    {"9\xE2\x80\xB2-6\xE2\x80\xB3", 0, 2.8956},
    {"9'-6-1/2\"", 0, 2.9083},
    {"9 ft 6 1/2 in", 0, 2.9083},
    {"8.5ft", 0, 2.5908},
    {"1 foot", 0, 0.3048},
    {"2 feet", 0, 0.6096},
    {"3.6 m", 0, 3.6},
    {"610mm", 0, 0.61},
    {"12.7 mm", 0, 0.0127},
    {"61 cm", 0, 0.61},
    {".5m", 0, 0.5},
    {"2.", 1, 2},
    {"16", 0.0254, 0.4064},
    {"5/8", 0.0254, 0.015875},
    {"0mm", 0, 0},
    {"16", 0, -1},
    {"", 1, -1},
    {"  ", 1, -1},
    {"in", 0, -1},
    {"-3m", 0, -1},
    {"3-m", 0, -1},
    {"3m 4", 0, -1},
    {"9ft 6", 0, -1},
    {"9ft 6mm", 0, -1},
    {"9ft 6in 2in", 0, -1},
    {"3.5/8in", 0, -1},
    {"1/0in", 0, -1},
    {"1/2.5in", 0, -1},
    {"3 4in", 0, -1},
    {"3,6 m", 0, -1},
    {"1e3mm", 0, -1},
    {"0x10mm", 0, -1},
    {"3 yd", 0, -1},
    {"16in.", 0, -1},
    {"1234567890123456mm", 0, -1},
    {"..5m", 0, -1},
};

START_TEST(lengths) {
  const struct length_row *row = &length_rows[_i];
  const char *expected = NULL;
  double metres = -7;
  bool read = units_parse_length(row->written, row->unit_m, &metres, &expected);
  ck_assert_msg(read == (row->metres >= 0), "%s: read %d", row->written, read);
  if (read)
    ck_assert_msg(fabs(metres - row->metres) <= LENGTH_M, "%s: %.17g", row->written, metres);
  else
    ck_assert_msg(metres < -6 && expected && expected[0], "%s: untouched, with what was wanted",
                  row->written);
}
END_TEST

static const struct named_row {
  const char *unit;
  double value, metres;
} named_rows[] = {
    {"m", 2.7, 2.7}, {"mm", 610, 0.61}, {"cm", 61, 0.61}, {"in", 12, 0.3048}, {"ft", 9.5, 2.8956}};

START_TEST(named_units) {
  double metres = 0;
  ck_assert(units_to_metres(named_rows[_i].unit, named_rows[_i].value, &metres));
  ck_assert_double_eq_tol(metres, named_rows[_i].metres, LENGTH_M);
  ck_assert(!units_to_metres("furlong", 1, &metres));
}
END_TEST

typedef void printer(text *, double, units_system);
static const struct print_row {
  printer *print;
  double value;
  const char *us, *si;
} print_rows[] = {
    {units_put_thickness, 0.123825, "4-7/8 in",
     "123.8 mm"}, /* 3-5/8 in stud and two 5/8 in boards */
    {units_put_thickness, 0.0127, "1/2 in", "12.7 mm"},
    {units_put_thickness, 0.1016, "4 in", "101.6 mm"},
    {units_put_thickness, 0, "0 in", "0.0 mm"},
    {units_put_thickness, 0.0016, "1/16 in", "1.6 mm"},
    {units_put_thickness, 0.1015, "4 in", "101.5 mm"},
    {units_put_thickness, -0.0127, "-1/2 in", "-12.7 mm"},
    {units_put_height, 2.8956, "9 ft 6 in", "2.90 m"},
    {units_put_height, 2.7, "8 ft 10-5/16 in", "2.70 m"},
    {units_put_height, 0.3048 - 1e-4, "1 ft 0 in", "0.30 m"},
    {units_put_height, 0.1, "0 ft 3-15/16 in", "0.10 m"},
    {units_put_surface_mass, 4.882427636, "1.0 psf", "4.9 kg/m2"},
    {units_put_surface_mass, 24.8, "5.1 psf", "24.8 kg/m2"},
};

START_TEST(printing) {
  const struct print_row *row = &print_rows[_i];
  text us, si;
  text_init(&us, memory, 100);
  text_init(&si, memory, 100);
  row->print(&us, row->value, UNITS_US);
  row->print(&si, row->value, UNITS_SI);
  ck_assert_str_eq(us.data, row->us);
  ck_assert_str_eq(si.data, row->si);
}
END_TEST

/* What is printed reads back as the same length to 1/32 in. */
START_TEST(printed_lengths_read_back) {
  for (int sixteenths = 1; sixteenths < 2000; sixteenths += 7) {
    double metres = sixteenths * 0.0254 / 16, thickness, height;
    const char *expected;
    text a, b;
    text_init(&a, memory, 100);
    text_init(&b, memory, 100);
    units_put_thickness(&a, metres, UNITS_US);
    units_put_height(&b, metres, UNITS_US);
    ck_assert_msg(units_parse_length(a.data, 0, &thickness, &expected), "%s", a.data);
    ck_assert_msg(units_parse_length(b.data, 0, &height, &expected), "%s", b.data);
    ck_assert_double_eq_tol(thickness, metres, LENGTH_M);
    ck_assert_double_eq_tol(height, metres, LENGTH_M);
  }
}
END_TEST

/* The derived factors from the exact ones. */
START_TEST(factors_agree) {
  double newton = UNITS_KG_PER_LB * UNITS_GRAVITY, ft2 = UNITS_M_PER_FT * UNITS_M_PER_FT;
  ck_assert_double_eq_tol(UNITS_M_PER_FT, 12 * UNITS_M_PER_IN, LENGTH_M);
  ck_assert_double_eq_tol(UNITS_M2_PER_FT2, ft2, LENGTH_M);
  ck_assert_double_eq_tol(UNITS_N_PER_LBF / newton, 1, FACTOR_SHARE);
  ck_assert_double_eq_tol(UNITS_PA_PER_PSF / (newton / ft2), 1, FACTOR_SHARE);
  ck_assert_double_eq_tol(UNITS_KG_M2_PER_PSF / (UNITS_KG_PER_LB / ft2), 1, FACTOR_SHARE);
}
END_TEST

/* ISO 266: nominal frequencies lie within 2 % of 1000 x 10^(n/10). */
START_TEST(bands_are_third_octaves) {
  for (int i = 0; i < BANDS; i++)
    ck_assert_double_eq_tol(bands_hz[i] / (1000 * pow(10, (i - 13) / 10.0)), 1, 0.02);
  ck_assert_double_eq(bands_hz[BAND_80], 80);
  ck_assert_double_eq(bands_hz[BAND_100], 100);
  ck_assert_double_eq(bands_hz[BAND_125], 125);
  ck_assert_double_eq(bands_hz[BAND_500], 500);
  ck_assert_double_eq(bands_hz[BAND_3150], 3150);
  ck_assert_double_eq(bands_hz[BAND_4000], 4000);
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

int main(void) {
  Suite *s = suite_create("units");
  TCase *t = tcase_create("units");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, lengths, 0, ROWS(length_rows));
  tcase_add_loop_test(t, named_units, 0, ROWS(named_rows));
  tcase_add_loop_test(t, printing, 0, ROWS(print_rows));
  tcase_add_test(t, printed_lengths_read_back);
  tcase_add_test(t, factors_agree);
  tcase_add_test(t, bands_are_third_octaves);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
