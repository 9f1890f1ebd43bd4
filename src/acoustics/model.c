#include "acoustics/model.h"

#include <math.h>

#define PI 3.14159265358979323846

double model_subband_hz(int band, int i) {
  return bands_hz[band] * exp2((i - 1) / 9.0);
}

double model_sin2(const struct acoustics *k, double f_hz, int i, double *weight) {
  /* Gauss-Legendre on (0, 1), four points (Abramowitz and Stegun, table 25.4). */
  static const double node[MODEL_ANGLES] = {0.0694318442029737, 0.3300094782075719,
                                            0.6699905217924281, 0.9305681557970263};
  static const double share[MODEL_ANGLES] = {0.1739274225687269, 0.3260725774312731,
                                             0.3260725774312731, 0.1739274225687269};
  double cos2 = k->sound_speed / (2 * PI * f_hz * sqrt(k->test_area_m2));
  double top = 1 - fmin(k->limit_cos2_max, cos2);
  *weight = share[i];
  return node[i] * top;
}

double complex model_leaf_z(const struct acoustics *k, const model_leaf *l, double f_hz,
                            double s2) {
  double omega = 2 * PI * f_hz;
  double ratio = f_hz / l->critical_hz;
  double complex stiff = ratio * ratio * s2 * s2 * (1 + I * l->loss);
  double z0 = k->air_density * k->sound_speed / sqrt(1 - s2);
  return I * omega * l->mass_kg_m2 * (1 - stiff) / z0;
}

void model_fibre(const struct acoustics *k, double f_hz, double complex *z_rel,
                 double complex *k_rel) {
  /* Y. Miki, J. Acoust. Soc. Jpn (E) 11 (1990), as recalled in docs/methods/sound.md. */
  double q = f_hz / k->fill_resistivity;
  double z = pow(q, -0.632), n = pow(q, -0.618);
  *z_rel = 1 + 0.0699 * z - I * 0.107 * z;
  *k_rel = 1 + 0.109 * n - I * 0.160 * n;
}

/* One layer of air or fibre as a transfer matrix; pressures over z0 = rho c / cos of the air
 * outside. */
static model_matrix gap_matrix(const struct acoustics *k, const model_gap *g, double f_hz,
                               double s2) {
  double k0 = 2 * PI * f_hz / k->sound_speed;
  double complex z_rel = 1, k_rel = 1 - I * k->empty_loss * pow(500 / f_hz, k->empty_loss_fall);
  if (g->filled) model_fibre(k, f_hz, &z_rel, &k_rel);
  double complex kz_rel = csqrt(k_rel * k_rel - s2);
  double complex z = z_rel * k_rel / kz_rel * sqrt(1 - s2);
  double complex wave = cexp(I * k0 * kz_rel * g->depth_m), back = 1 / wave;
  double complex cosine = (wave + back) / 2, i_sine = (wave - back) / 2;
  model_matrix m = {cosine, z * i_sine, i_sine / z, cosine};
  return m;
}

static model_matrix matrix_times(model_matrix x, model_matrix y) {
  model_matrix m = {x.a * y.a + x.b * y.c, x.a * y.b + x.b * y.d, x.c * y.a + x.d * y.c,
                    x.c * y.b + x.d * y.d};
  return m;
}

model_matrix model_cavity_matrix(const struct acoustics *k, const model_cavity *c, double f_hz,
                                 double s2) {
  model_matrix m = {1, 0, 0, 1};
  for (int i = 0; i < c->gaps; i++) {
    if (c->gap[i].depth_m > 0) m = matrix_times(m, gap_matrix(k, &c->gap[i], f_hz, s2));
  }
  return m;
}

double model_stud_static(const struct acoustics *k, double web_m, double thickness_m) {
  double d = k->steel_modulus_pa * pow(thickness_m, 3) / (12 * (1 - k->poisson * k->poisson));
  double e = k->screw_edge_m;
  return (2 * e * e * e / 3 + e * e * web_m) / d;
}

/* Ratings are published for the lightest and the heaviest gauge, where the beam formula holds, and
 * step sizes for those between, which fall slower than its cube: a power law of its own up to the
 * middle gauge, and from there ever faster down to the heavy one. */
static double gauge_compliance(const struct acoustics *k, double web_m, double thickness_m) {
  double light_m = k->gauge_light_m, middle_m = k->gauge_middle_m, heavy_m = k->gauge_heavy_m;
  if (thickness_m <= light_m || thickness_m >= heavy_m)
    return model_stud_static(k, web_m, thickness_m);
  double light = model_stud_static(k, web_m, light_m);
  if (thickness_m <= middle_m) return light * pow(light_m / thickness_m, k->gauge_fall);
  double middle = light * pow(light_m / middle_m, k->gauge_fall);
  double heavy = model_stud_static(k, web_m, heavy_m);
  double way = log(thickness_m / middle_m) / log(heavy_m / middle_m);
  return middle * pow(heavy / middle, way * way);
}

double model_stud_c500(const struct acoustics *k, double web_m, double thickness_m) {
  return gauge_compliance(k, web_m, thickness_m) * pow(k->stud_static_hz / 500, k->compliance_fall);
}

double model_compliance(const struct acoustics *k, double c500_m2_n, double f_hz) {
  return c500_m2_n * pow(500 / f_hz, k->compliance_fall);
}

static double bay_stiffness(const struct acoustics *k, const model_leaf *l, double support_m) {
  return k->bay_stiffness * l->bending_n_m / pow(support_m, 4);
}

double model_low_spring(const struct acoustics *k, const model_wall *w, double f_hz) {
  double fade = 1 + (f_hz / k->bay_fade_hz) * (f_hz / k->bay_fade_hz);
  if (w->bridge == BRIDGE_NONE) return k->double_coupling / fade;
  double compliance = k->low_share * model_compliance(k, w->c500_m2_n, f_hz) * w->line_m;
  compliance += 1 / bay_stiffness(k, &w->leaf[0], w->support_m[0]);
  compliance += 1 / bay_stiffness(k, &w->leaf[w->leaves - 1], w->support_m[1]);
  return 1 / compliance / fade;
}

/* A spring of `s` N/m3 between the two faces of a cavity; z0 scales pressures. */
static model_matrix matrix_sprung(model_matrix m, double complex s, double omega, double z0) {
  double complex q = s / (I * omega * z0);
  double complex n = 1 + m.c * q;
  model_matrix out = {(m.a + q * m.c) / n, (m.b + q * (m.a + m.d - 2)) / n, m.c / n,
                      (m.d + q * m.c) / n};
  return out;
}

static double tau_at(const struct acoustics *k, const model_wall *w, double f_hz, double s2,
                     double complex spring) {
  double z0 = k->air_density * k->sound_speed / sqrt(1 - s2);
  model_matrix m = {1, model_leaf_z(k, &w->leaf[0], f_hz, s2), 0, 1};
  for (int i = 1; i < w->leaves; i++) {
    model_matrix cavity = model_cavity_matrix(k, &w->cavity[i - 1], f_hz, s2);
    if (w->leaves == 2) cavity = matrix_sprung(cavity, spring, 2 * PI * f_hz, z0);
    model_matrix leaf = {1, model_leaf_z(k, &w->leaf[i], f_hz, s2), 0, 1};
    m = matrix_times(matrix_times(m, cavity), leaf);
  }
  double complex n = m.a + m.b + m.c + m.d;
  return 4 / (creal(n) * creal(n) + cimag(n) * cimag(n));
}

double model_air_tau(const struct acoustics *k, const model_wall *w, double f_hz) {
  double complex spring = model_low_spring(k, w, f_hz) * (1 + I * k->spring_loss);
  double sum = 0;
  for (int i = 0; i < MODEL_ANGLES; i++) {
    double weight;
    double s2 = model_sin2(k, f_hz, i, &weight);
    sum += weight * tau_at(k, w, f_hz, s2, spring);
  }
  return sum;
}

double model_resonance_hz(const struct acoustics *k, const model_wall *w) {
  double m1 = w->leaf[0].mass_kg_m2, m2 = w->leaf[w->leaves - 1].mass_kg_m2, depth = 0;
  for (int i = 0; i + 1 < w->leaves; i++) {
    for (int g = 0; g < w->cavity[i].gaps; g++) depth += w->cavity[i].gap[g].depth_m;
  }
  return k->sound_speed / (2 * PI) * sqrt(k->air_density * (m1 + m2) / (depth * m1 * m2));
}

static double below_critical(double f_hz, double critical_hz) {
  return fmax(0, 1 - (f_hz / critical_hz) * (f_hz / critical_hz));
}

double model_bridge_tau(const struct acoustics *k, const model_wall *w, double f_hz) {
  if (w->bridge == BRIDGE_NONE) return 0;
  const model_leaf *l1 = &w->leaf[0], *l2 = &w->leaf[w->leaves - 1];
  double omega = 2 * PI * f_hz, c = k->sound_speed, rho = k->air_density;
  double m1 = l1->mass_kg_m2, m2 = l2->mass_kg_m2;
  double g = m1 * sqrt(2 * PI * l2->critical_hz) + m2 * sqrt(2 * PI * l1->critical_hz);
  double reach = 4 * pow(omega, 1.5) * m1 * m2 * c * model_compliance(k, w->c500_m2_n, f_hz) - g;
  double below = below_critical(f_hz, l1->critical_hz) * below_critical(f_hz, l2->critical_hz);
  double above = 8 * f_hz * l1->loss * l2->loss / (PI * sqrt(l1->critical_hz * l2->critical_hz));
  double radiation = 1 / (below / 2 + above);
  double f0 = model_resonance_hz(k, w) / f_hz;
  double tau = 64 * rho * rho * c * c * c * radiation /
               ((g * g + reach * reach) * w->line_m * omega * omega);
  return tau * pow(10, k->bridge_db / 10) / (1 + f0 * f0 * f0 * f0);
}

model_leaf model_tied(const model_leaf *x, const model_leaf *y) {
  double m1 = x->mass_kg_m2, m2 = y->mass_kg_m2;
  double f1 = x->critical_hz, f2 = y->critical_hz;
  model_leaf l = {.mass_kg_m2 = m1 + m2,
                  .critical_hz = sqrt((m1 + m2) / (m1 / (f1 * f1) + m2 / (f2 * f2))),
                  .loss = fmax(x->loss, y->loss),
                  .bending_n_m = x->bending_n_m + y->bending_n_m};
  return l;
}

/* The chain in which leaves that studs tie move as one; its air path is added to that of the whole
 * chain. False when nothing is tied. */
static bool tied_chain(const model_wall *w, model_wall *out) {
  bool any = false;
  *out = *w;
  out->leaves = 1;
  for (int i = 0; i + 1 < w->leaves; i++) {
    if (w->tied[i]) {
      model_leaf *last = &out->leaf[out->leaves - 1];
      *last = model_tied(last, &w->leaf[i + 1]);
      any = true;
    } else {
      out->cavity[out->leaves - 1] = w->cavity[i];
      out->leaf[out->leaves++] = w->leaf[i + 1];
    }
  }
  return any && out->leaves > 1;
}

static double all_paths(const struct acoustics *k, const model_wall *w, double f_hz,
                        double *bridge) {
  double air = model_air_tau(k, w, f_hz);
  model_wall tied;
  if (w->leaves > 2 && tied_chain(w, &tied)) air += model_air_tau(k, &tied, f_hz);
  *bridge = model_bridge_tau(k, w, f_hz);
  return air;
}

static double decibel(double tau) {
  return -10 * log10(tau);
}

void model_paths(const model_wall *w, const struct acoustics *k, double air_db[BANDS],
                 double bridge_db[BANDS]) {
  for (int b = 0; b < BANDS; b++) {
    double air = 0, bridge = 0;
    for (int i = 0; i < MODEL_SUBBANDS; i++) {
      double part;
      air += all_paths(k, w, model_subband_hz(b, i), &part) / MODEL_SUBBANDS;
      bridge += part / MODEL_SUBBANDS;
    }
    air_db[b] = decibel(air);
    bridge_db[b] = bridge > 0 ? decibel(bridge) : HUGE_VAL;
  }
}

void model_tl(const model_wall *w, const struct acoustics *k, double tl_db[BANDS]) {
  double ceiling = pow(10, -k->ceiling_db / 10);
  for (int b = 0; b < BANDS; b++) {
    double tau = 0;
    for (int i = 0; i < MODEL_SUBBANDS; i++) {
      double bridge;
      tau += all_paths(k, w, model_subband_hz(b, i), &bridge) + bridge;
    }
    tl_db[b] = decibel(tau / MODEL_SUBBANDS + ceiling);
  }
}
