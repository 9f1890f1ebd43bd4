#include "write.h"

#include <math.h>
#include <stdlib.h>

/* Significant digits and a power of ten, in the form 7.94e-07 where short forms would not do. */
static void put_value(text *out, double value) {
  double size = fabs(value);
  if (value == 0 || (size >= 1e-3 && size < 1e6)) {
    int decimals = value == 0 ? 0 : WRITE_DIGITS - 1 - (int)floor(log10(size));
    text_number(out, value, decimals < 0 ? 0 : decimals > 9 ? 9 : decimals);
    return;
  }
  int exponent = (int)floor(log10(size));
  text_number(out, value / pow(10, exponent), WRITE_DIGITS - 1);
  text_putf(out, "e%d", exponent);
}

double write_rounded(arena *a, double value) {
  text t;
  text_init(&t, a, 64);
  put_value(&t, value);
  return strtod(t.data, NULL);
}

static void put_string(text *out, const char *s) {
  text_char(out, '"');
  for (; *s; s++) {
    if (*s == '"' || *s == '\\') text_char(out, '\\');
    text_char(out, *s);
  }
  text_char(out, '"');
}

static void put_scalar(text *out, const json_value *v) {
  if (v->kind == JSON_STRING)
    put_string(out, v->string);
  else if (v->kind == JSON_BOOL)
    text_put(out, v->boolean ? "true" : "false");
  else
    put_value(out, v->number);
}

static void put_key(text *out, const char *key, bool first) {
  text_putf(out, "%s\"%s\": ", first ? "" : ", ", key);
}

/* The members of a record; the value of a coefficient is the fitted one. */
static void put_coefficient(text *out, const json_value *record, const fit *f, const outcome *o) {
  const json_value *id = json_get(record, "id");
  double value = json_get(record, "value")->number;
  for (int i = 0; i < f->parameters; i++) {
    if (text_equal(f->parameter[i].id, id->string))
      value = *(const double *)((const char *)&o->fitted + f->parameter[i].offset);
  }
  text_put(out, "    {");
  for (const json_value *v = record->first; v; v = v->next) {
    bool own_line = text_equal(v->key, "meaning") || text_equal(v->key, "source");
    if (own_line)
      text_putf(out, ",\n     \"%s\": ", v->key);
    else
      put_key(out, v->key, v == record->first);
    if (text_equal(v->key, "value"))
      put_value(out, value);
    else
      put_scalar(out, v);
  }
  text_put(out, "}");
}

static void put_coefficients(text *out, const json_value *list, const fit *f, const outcome *o) {
  text_put(out, "  \"coefficients\": [\n");
  for (const json_value *v = list->first; v; v = v->next) {
    put_coefficient(out, v, f, o);
    text_put(out, v->next ? ",\n" : "\n");
  }
  text_put(out, "  ],\n");
}

static void put_families(text *out, const fit *f, const outcome *o) {
  text_put(out, "  \"families\": [\n");
  for (int i = 0; i < FAMILY_COUNT; i++) {
    error_summary t = cross_summary(f->data, o->trained, i),
                  c = cross_summary(f->data, o->folds, i);
    text_putf(out, "    {\"id\": \"%s\", \"rows\": %d, \"bias\": ", sound_family_names[i], c.rows);
    text_number(out, t.bias, 2);
    text_put(out, ", \"rms\": ");
    text_number(out, t.rms, 2);
    text_put(out, ", \"cross_bias\": ");
    text_number(out, c.bias, 2);
    text_put(out, ", \"cross_rms\": ");
    text_number(out, c.rms, 2);
    text_put(out, ", \"sd\": ");
    text_number(out, cross_sd(&c), 2);
    text_put(out, i + 1 < FAMILY_COUNT ? "},\n" : "}\n");
  }
  text_put(out, "  ],\n");
}

static void put_list(text *out, const char *name, const json_value *list) {
  text_putf(out, "  \"%s\": [\n", name);
  for (const json_value *v = list->first; v; v = v->next) {
    text_put(out, "    {");
    for (const json_value *m = v->first; m; m = m->next) {
      put_key(out, m->key, m == v->first);
      put_scalar(out, m);
    }
    text_put(out, v->next ? "},\n" : "}\n");
  }
  text_put(out, "  ],\n");
}

static void put_summary(text *out, const char *name, const error_summary *s) {
  text_putf(out, "    \"%s\": {\"rms\": ", name);
  text_fixed(out, s->rms, 2);
  text_put(out, ", \"largest\": ");
  text_fixed(out, s->largest, 2);
  text_put(out, ", \"within_3_share\": ");
  text_fixed(out, (double)s->within_3 / s->rows, 3);
  text_put(out, "},\n");
}

static void put_rows(text *out, const fit *f, const outcome *o) {
  const dataset *d = f->data;
  bool first = true;
  text_put(out, "    \"rows\": [");
  for (int i = 0; i < d->count; i++) {
    const sample *s = &d->row[i];
    if (s->curve) continue;
    text_putf(out, "%s\n      {\"id\": \"%s\", \"family\": \"%s\", \"rating\": ", first ? "" : ",",
              s->id, sound_family_names[s->family]);
    text_number(out, s->rating, 0);
    text_put(out, ", \"error\": ");
    text_fixed(out, o->trained[i], 2);
    text_put(out, ", \"cross_error\": ");
    text_fixed(out, o->folds[i], 2);
    text_put(out, "}");
    first = false;
  }
  text_put(out, "\n    ]\n");
}

void write_acoustics(text *out, const json_value *old, const fit *f, const outcome *o) {
  text_put(out, "{\n  \"septum\": \"acoustics/1\",\n");
  for (const json_value *v = old->first; v; v = v->next) {
    if (!text_equal(v->key, "about") && !text_equal(v->key, "source")) continue;
    text_putf(out, "  \"%s\": ", v->key);
    put_string(out, v->string);
    text_put(out, ",\n");
  }
  put_coefficients(out, json_get(old, "coefficients"), f, o);
  put_families(out, f, o);
  put_list(out, "metrics", json_get(old, "metrics"));
  put_list(out, "outside", json_get(old, "outside"));
  error_summary t = cross_summary(f->data, o->trained, FAMILY_COUNT);
  error_summary c = cross_summary(f->data, o->folds, FAMILY_COUNT);
  error_summary n = cross_summary(f->data, o->numbers, FAMILY_COUNT);
  text_put(out, "  \"fit\": {\n");
  put_summary(out, "trained", &t);
  put_summary(out, "cross_validated", &c);
  put_summary(out, "wall_numbers_left_out", &n);
  text_put(out, "    \"cross_rms_by_seed\": [");
  for (int i = 0; i < CROSS_SEEDS; i++) {
    text_put(out, i ? ", " : "");
    text_fixed(out, o->seed_rms[i], 2);
  }
  text_put(out, "],\n");
  text_put(out, "    \"shape_mae_db\": ");
  text_fixed(out, o->shape_mae_db, 2);
  text_put(out, ", \"shape_125_db\": ");
  text_fixed(out, o->shape_125_db, 2);
  text_put(out, ",\n");
  put_rows(out, f, o);
  text_put(out, "  }\n}\n");
}
