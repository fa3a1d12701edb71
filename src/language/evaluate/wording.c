#include "config.h"
#include "language/evaluate/wording.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/session_private.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/number.h"
#include "support/text.h"
#include "units/constants.h"

enum { SENTENCE_DIGITS = 6, ROUGH_DIGITS = 3 };

static const char *
digits_text (struct arena *arena, double value, int digits)
{
  struct text text;
  text_init (&text);
  number_write (&text, value, digits);
  if (memchr (text.bytes, '.', text.length) && !memchr (text.bytes, 'e', text.length)) {
    while (text.bytes[text.length - 1] == '0') {
      text.length--;
    }
    if (text.bytes[text.length - 1] == '.') {
      text.length--;
    }
  }
  const char *copy = arena_copy (arena, text.bytes, text.length);
  text_clear (&text);
  return copy;
}

const char *
figure_text (struct arena *arena, double value)
{
  return digits_text (arena, value, SENTENCE_DIGITS);
}

const char *
rough_text (struct arena *arena, double value)
{
  return digits_text (arena, value, ROUGH_DIGITS);
}

const char *
spread_text (struct arena *arena, double u)
{
  enum { SPREAD_DIGITS = 2 };
  return digits_text (arena, u, SPREAD_DIGITS);
}

const char *
share_text (struct arena *arena, double x)
{
  if (fabs (x) < 0.000999 && x != 0) {
    return arena_format (arena, "%s ppm", figure_text (arena, x * 1e6));
  }
  return arena_format (arena, "%s mol%%", figure_text (arena, x * 100));
}

const char *
temperature_text (struct arena *arena, double T, bool customary)
{
  return customary ? arena_format (arena, "%s degF", figure_text (arena, T * 1.8 - 459.67))
                   : arena_format (arena, "%s degC", figure_text (arena, T - ICE_POINT));
}

const char *
pressure_text (struct arena *arena, double p, bool customary)
{
  /* psi: NIST SP 811 (2008), App. B.8.  */
  const double psi = 0.45359237 * 9.80665 / (0.0254 * 0.0254);
  return customary ? arena_format (arena, "%s psia", figure_text (arena, p / psi))
                   : arena_format (arena, "%s bar(a)", figure_text (arena, p / 1e5));
}

const char *
actual_text (struct arena *arena, const struct actual *a)
{
  const char *model = strcmp (a->model, "ideal") == 0 ? "ideal gas" : a->model;
  return arena_format (arena, "%s, %s, Z %s, %s", temperature_text (arena, a->T, a->customary),
                       pressure_text (arena, a->p, a->customary), figure_text (arena, a->Z),
                       model);
}

const char *
moisture_word (const struct evaluation *ev, const struct composition *gas)
{
  return composition_fraction (gas, ev->session->water) > 0 ? "wet" : "dry";
}

const char *
name_text (struct arena *arena, const char *name)
{
  size_t n = strlen (name);
  bool plain = n > 0 && ((name[0] >= 'a' && name[0] <= 'z') || (name[0] >= 'A' && name[0] <= 'Z'));
  for (size_t i = 0; i < n && plain; i++) {
    bool letter = strchr ("abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789_",
                          name[i]) != NULL;
    plain = letter || name[i] == '+' || (name[i] == '-' && i + 1 < n);
  }
  return plain ? name : arena_format (arena, "\"%s\"", name);
}

/* Where in a statement's source a column of a line stands; null: not in it.  */
static const char *
source_at (const struct statement *statement, int line, int column)
{
  const char *at = statement->typed ? statement->typed : statement->source;
  int here = statement->at.first;
  for (int l = statement->at.line; at && l < line; l++) {
    at = strchr (at, '\n');
    at = at ? at + 1 : NULL;
    here = 1;
  }
  if (!at || column < here || line < statement->at.line) {
    return NULL;
  }
  for (; here < column && *at; here++) {
    do {
      at++;
    } while (((unsigned char) *at & 0xC0) == 0x80);
  }
  return at;
}

const char *
node_text (struct arena *arena, const struct statement *statement, const struct node *node)
{
  if (node->kind == NODE_NAME) {
    return node->quoted ? name_text (arena, node->text) : node->text;
  }
  const char *from = source_at (statement, node->at.line, node->at.first);
  const char *to = source_at (statement, node->at.line, node->at.last + 1);
  return from && to ? arena_copy (arena, from, (size_t) (to - from)) : statement->source;
}

static void
assume (struct evaluation *ev, enum message kind, const char *fact1, const char *fact2,
        enum alternative alternative)
{
  evaluation_assume (ev, &(struct assumption) { .kind = kind, .fact = { fact1, fact2, NULL, NULL },
                                                .alternative = alternative });
}

void
assume_site_pressure (struct evaluation *ev)
{
  if (!ev->describe) {
    return;
  }
  const struct settings *s = ev->settings;
  const char *bar = figure_text (ev->arena, s->site_pressure / 1e5);
  const char *p = arena_format (ev->arena, "%s bar", bar);
  if (!isnan (s->site_altitude)) {
    assume (ev, MESSAGE_TAKEN_BAROMETER_ALTITUDE, p, s->site_altitude_text, ALTERNATIVE_SITE);
    note (ev, MESSAGE_NOTE_BAROMETER_ESTIMATED, NULL, NULL, NULL);
  } else if (!s->is_set[SETTING_SITE_PRESSURE]) {
    assume (ev, MESSAGE_TAKEN_BAROMETER, p, NULL, ALTERNATIVE_SITE);
  }
}

void
assume_barometer (struct evaluation *ev, const char *figure, const char *unit, double absolute)
{
  const struct settings *s = ev->settings;
  assume_site_pressure (ev);
  if (!isnan (s->site_altitude) || s->is_set[SETTING_SITE_PRESSURE]) {
    assume (ev, MESSAGE_TAKEN_GAUGE,
            arena_format (ev->arena, "%s %s is %s", figure, unit,
                          pressure_text (ev->arena, absolute, strstr (unit, "psi") != NULL)),
            arena_format (ev->arena, "%s bar", figure_text (ev->arena, s->site_pressure / 1e5)),
            ALTERNATIVE_BAROMETER);
  }
}

void
assume_counted_as (struct evaluation *ev, const char *sum, const char *component)
{
  if (ev->describe) {
    evaluation_assume (ev, &(struct assumption) { .kind = MESSAGE_TAKEN_COUNTED_AS,
                                                  .fact = { sum, component } });
  }
}

void
assume_family (struct evaluation *ev, enum reference_family family)
{
  evaluation_touch (ev, touch_family (family));
  if (ev->describe) {
    /* One that was set is said too: it may have been another shift that set it.  */
    bool set = ev->settings->family[family].set;
    evaluation_assume (ev, &(struct assumption) {
        .kind = set ? MESSAGE_TAKEN_REFERENCE_SET
                : family == FAMILY_SCCM ? MESSAGE_TAKEN_REFERENCE_SCCM : MESSAGE_TAKEN_REFERENCE,
        .fact = { reference_family_name (family), ev->settings->family[family].text },
        .alternative = set ? ALTERNATIVE_SHIPPED : ALTERNATIVE_FAMILY, .family = family });
  }
}

void
assume_vapour_pressure (struct evaluation *ev, double psat, bool over_ice, bool or_liquid)
{
  if (ev->describe) {
    assume (ev, MESSAGE_TAKEN_VAPOUR_PRESSURE,
            arena_format (ev->arena, "%s kPa", figure_text (ev->arena, psat / 1000)),
            over_ice ? "ice" : "liquid",
            or_liquid ? ALTERNATIVE_LIQUID : ALTERNATIVE_VAPOUR);
  }
}

void
assume_model (struct evaluation *ev, const char *model, double Z, double uncertainty)
{
  if (!ev->describe) {
    return;
  }
  const char *text = figure_text (ev->arena, Z);
  for (size_t i = 0; i < ev->assumption_count; i++) {
    struct assumption *a = &ev->assumptions[i];
    if ((a->kind == MESSAGE_TAKEN_MODEL || a->kind == MESSAGE_TAKEN_MODEL_WITHIN)
        && strcmp (a->fact[0], model) == 0) {
      /* One line for all the Z of an answer.  */
      if (!strstr (a->fact[1], text)) {
        a->fact[1] = arena_format (ev->arena, "%s, %s", a->fact[1], text);
      }
      return;
    }
  }
  evaluation_assume (ev, &(struct assumption) {
      .kind = isfinite (uncertainty) ? MESSAGE_TAKEN_MODEL_WITHIN : MESSAGE_TAKEN_MODEL,
      .fact = { model, text, isfinite (uncertainty)
                               ? figure_text (ev->arena, 100 * uncertainty) : NULL },
      .alternative = ALTERNATIVE_IDEAL });
}

void
note (struct evaluation *ev, enum message kind, const char *fact1, const char *fact2,
      const char *fact3)
{
  if (ev->result) {
    struct remark *remark = result_remark (ev->result, kind, fact1, fact2);
    remark->fact[2] = fact3;
  }
}

void
note_species (struct evaluation *ev, const struct species *species)
{
  if (!ev->result) {
    return;
  }
  if (species->origin == SPECIES_FORMULA) {
    note (ev, MESSAGE_NOTE_FORMULA_ONLY, species->key,
          arena_format (ev->arena, "%s g/mol",
                        figure_text (ev->arena, species->molar_mass * 1000)), NULL);
  } else if (species->origin == SPECIES_USERS) {
    note (ev, MESSAGE_NOTE_TABLE_USERS, species->key, species->source, NULL);
  }
}

void
note_water (struct evaluation *ev, double before, double after)
{
  if (!ev->result || fabs (after - before) <= 1e-12) {
    return;
  }
  const char *change = share_text (ev->arena, after);
  if (before > 0) {
    change = arena_format (ev->arena, "from %s to %s", share_text (ev->arena, before), change);
  }
  note (ev, after > before ? MESSAGE_NOTE_WATER_ADDED : MESSAGE_NOTE_WATER_REMOVED, change, NULL,
        NULL);
}
