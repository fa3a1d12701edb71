/* What was done to compositions.  */
#include "config.h"
#include "language/evaluate/record.h"

#include <math.h>
#include "gas/analysis.h"
#include "gas/composition.h"
#include "gas/species.h"
#include "language/session_private.h"
#include "support/arena.h"

/* Parts in the order they are met, with up to three figures each.  */
struct parts {
  unsigned count;
  const struct species **species;
  const char **terms;
  double *a, *b, *c;
};

static struct parts
parts_start (struct evaluation *ev, size_t most)
{
  return (struct parts) { 0, ARENA_ARRAY (ev->arena, most, const struct species *),
                          ARENA_ARRAY (ev->workings->arena, most, const char *),
                          ARENA_ARRAY (ev->arena, most, double),
                          ARENA_ARRAY (ev->arena, most, double),
                          ARENA_ARRAY (ev->arena, most, double) };
}

static size_t
parts_at (struct parts *p, const struct species *species)
{
  unsigned i = 0;
  while (i < p->count && p->species[i] != species) {
    i++;
  }
  if (i == p->count) {
    p->species[i] = species;
    p->terms[i] = species->key;
    p->count++;
  }
  return i;
}

static const char *
amount_unit (const struct analysis *a)
{
  return a->whole == WHOLE_MOLE ? "mol/mol" : a->whole == WHOLE_MASS ? "mol/kg" : "mol";
}

/* ---- Lists ---- */

void
record_list (struct evaluation *ev, const struct analysis *analysis, const char *of)
{
  if (!ev->workings) {
    return;
  }
  const bool by_mass = analysis->whole == WHOLE_MASS;
  struct parts p = parts_start (ev, analysis->count);
  double total = 0;
  for (size_t i = 0; i < analysis->count; i++) {
    const struct part *part = &analysis->parts[i];
    size_t at = parts_at (&p, part->species);
    p.a[at] = by_mass ? part->amount * part->species->molar_mass : part->amount;
    total += p.a[at];
  }
  const struct step_column stated = { by_mass ? "w_i" : "a_i", p.a, by_mass ? "kg/kg"
                                      : amount_unit (analysis), STEP_TYPED, NULL };
  RECORD (ev, .name = "total of the parts of", .of = of ? of : "the list",
          .formula = by_mass ? "t = sum(w_i)" : "t = sum(a_i)", .value = total,
          .unit = by_mass ? "kg/kg" : amount_unit (analysis), .source = STEP_TYPED,
          .term_count = p.count, .terms = p.terms, STEP_COLUMNS (stated));
}

/* From masses: M = t/sum (w_i/M_i), x_i = w_i M/(t M_i).  */
static void
record_by_mass (struct evaluation *ev, const struct analysis *analysis,
                const struct composition *gas, double total, const char *of)
{
  struct parts p = parts_start (ev, analysis->count);
  for (size_t i = 0; i < analysis->count; i++) {
    const struct part *part = &analysis->parts[i];
    size_t at = parts_at (&p, part->species);
    p.a[at] = part->amount * part->species->molar_mass;
    p.b[at] = part->species->molar_mass;
    p.c[at] = composition_fraction (gas, part->species);
  }
  const struct step_column w = { "w_i", p.a, "kg/kg", NULL, NULL };
  const struct step_column M = { "M_i", p.b, "kg/mol", STEP_WEIGHTS, NULL };
  RECORD (ev, .name = "molar mass of", .of = of ? of : "the list", .formula = "M = t/sum(w_i/M_i)",
          .value = gas->molar_mass, .unit = "kg/mol", .source = STEP_DEFINITION,
          .term_count = p.count, .terms = p.terms, STEP_SYMBOLS (SYMBOL ("t", total, "kg/kg")),
          STEP_COLUMNS (w, M));
  RECORD (ev, .name = "shares by amount in", .of = of ? of : "the list",
          .formula = "x_i = w_i M/(t M_i)",
          .value = UNSTATED, .unit = "mol/mol", .source = STEP_DEFINITION, .term_count = p.count,
          .terms = p.terms,
          STEP_SYMBOLS (SYMBOL ("M", gas->molar_mass, "kg/mol"), SYMBOL ("t", total, "kg/kg")),
          STEP_COLUMNS ({ "x_i", p.c, "mol/mol", NULL, NULL }, w, M));
}

void
record_closed (struct evaluation *ev, const struct analysis *analysis,
               const struct composition *gas, double scaled, const char *of)
{
  if (!ev->workings) {
    return;
  }
  if (analysis->whole == WHOLE_MASS) {
    record_by_mass (ev, analysis, gas, analysis_total (analysis), of);
    return;
  }
  struct parts p = parts_start (ev, analysis->count);
  double total = 0;
  for (size_t i = 0; i < analysis->count; i++) {
    size_t at = parts_at (&p, analysis->parts[i].species);
    p.a[at] = analysis->parts[i].amount;
    p.c[at] = composition_fraction (gas, analysis->parts[i].species);
    total += analysis->parts[i].amount;
  }
  if (analysis->whole == WHOLE_MOLE && fabs (scaled - 1) <= 1e-12) {
    return;                              /* the shares are those stated */
  }
  RECORD (ev, .name = "shares, scaled to 1,", .of = of ? of : "the list",
          .formula = "x_i = a_i/t", .value = UNSTATED, .unit = "mol/mol",
          .source = analysis->whole == WHOLE_MOLE ? "within the total tolerance, as set"
                                                  : STEP_DEFINITION,
          .term_count = p.count, .terms = p.terms,
          STEP_SYMBOLS (SYMBOL ("t", total, amount_unit (analysis))),
          STEP_COLUMNS ({ "x_i", p.c, "mol/mol", NULL, NULL },
                        { "a_i", p.a, amount_unit (analysis), NULL, NULL }));
}

/* ---- Treatments ---- */

/* How much of a gas goes: that of its tracers over their share in it.  */
static void
record_tracers (struct evaluation *ev, const struct treated *t)
{
  double had = 0, share = 0;
  for (size_t k = 0; k < t->tracers->count; k++) {
    for (size_t i = 0; i < t->before->count; i++) {
      had += t->before->parts[i].species == t->tracers->at[k] ? t->before->parts[i].amount : 0;
    }
    share += composition_fraction (t->gas, t->tracers->at[k]);
  }
  RECORD (ev, .name = "taken out of", .of = t->of, .formula = "r = a_t/g_t", .value = had / share,
          .unit = amount_unit (t->before), .source = STEP_DEFINITION,
          STEP_SYMBOLS (SYMBOL ("a_t", had, amount_unit (t->before)),
                        CONSTANT ("g_t", share, "mol/mol", "the gas taken out")));
}

static void
record_scalars (struct evaluation *ev, const struct treated *t)
{
  const char *unit = t->before->whole == WHOLE_MASS ? "kg/kg" : "mol/mol";
  const struct treatment *did = t->did;
  if (fabs (did->added) > 0) {
    RECORD (ev, .name = "taken up by the balance part of", .of = t->of, .formula = "d = 1 - t",
            .value = did->added, .unit = unit, .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("t", did->total_before, unit)));
  } else if (fabs (did->factor - 1) > 0) {
    RECORD (ev, .name = "factor on every part of", .of = t->of, .formula = "f = 1/(t - r)",
            .value = did->factor, .unit = "1", .source = STEP_DEFINITION,
            STEP_SYMBOLS (SYMBOL ("t", did->total_before, unit),
                          SYMBOL ("r", did->removed, unit)));
  }
}

void
record_treatment (struct evaluation *ev, const struct treated *t)
{
  if (!ev->workings) {
    return;
  }
  struct parts p = parts_start (ev, t->before->count + t->after->count);
  if (t->gas) {
    record_tracers (ev, t);
  }
  record_scalars (ev, t);
  for (size_t i = 0; i < t->before->count; i++) {
    p.a[parts_at (&p, t->before->parts[i].species)] = t->before->parts[i].amount;
  }
  for (size_t i = 0; i < t->after->count; i++) {
    p.c[parts_at (&p, t->after->parts[i].species)] = t->after->parts[i].amount;
  }
  for (size_t i = 0; i < p.count; i++) {
    p.b[i] = p.a[i] - p.c[i] / t->did->factor;
    p.b[i] = fabs (p.b[i]) <= 1e-14 ? 0 : p.b[i];
  }
  RECORD (ev, .name = t->name, .of = t->of, .formula = "x_i = f (a_i - r_i)", .value = UNSTATED,
          .unit = amount_unit (t->after), .source = STEP_DEFINITION, .term_count = p.count,
          .terms = p.terms, STEP_SYMBOLS (SYMBOL ("f", t->did->factor, "1")),
          STEP_COLUMNS ({ "x_i", p.c, amount_unit (t->after), NULL, NULL },
                        { "a_i", p.a, amount_unit (t->before), NULL, NULL },
                        { "r_i", p.b, amount_unit (t->before), NULL, NULL }));
}

/* ---- Water ---- */

void
record_wetting (struct evaluation *ev, const struct composition *before,
                const struct composition *after)
{
  if (!ev->workings) {
    return;
  }
  const struct species *water = ev->session->water;
  struct parts p = parts_start (ev, before->count);
  double y_before = composition_fraction (before, water), y = composition_fraction (after, water);
  for (size_t i = 0; i < before->count; i++) {
    if (before->species[i] != water) {
      size_t at = parts_at (&p, before->species[i]);
      p.a[at] = before->fraction[i];
      p.c[at] = composition_fraction (after, before->species[i]);
    }
  }
  RECORD (ev, .name = "the dry parts with other water", .formula = "x_i = a_i (1 - y)/(1 - y_0)",
          .value = UNSTATED, .unit = "mol/mol", .source = STEP_DEFINITION, .term_count = p.count,
          .terms = p.terms,
          STEP_SYMBOLS (SYMBOL ("y", y, "mol/mol"), SYMBOL ("y_0", y_before, "mol/mol")),
          STEP_COLUMNS ({ "x_i", p.c, "mol/mol", NULL, NULL },
                        { "a_i", p.a, "mol/mol", NULL, NULL }));
}

/* ---- Streams ---- */

void
record_blend (struct evaluation *ev, const struct stream *a, const struct stream *b,
              const struct stream *made, int sign)
{
  if (!ev->workings) {
    return;
  }
  const char *unit = moles_unit (a->flow);
  struct parts p = parts_start (ev, a->gas->count + b->gas->count);
  for (size_t i = 0; i < a->gas->count; i++) {
    p.a[parts_at (&p, a->gas->species[i])] = a->gas->fraction[i];
  }
  for (size_t i = 0; i < b->gas->count; i++) {
    p.b[parts_at (&p, b->gas->species[i])] = b->gas->fraction[i];
  }
  for (size_t i = 0; i < p.count; i++) {
    p.c[i] = composition_fraction (made->gas, p.species[i]);
  }
  RECORD (ev, .name = sign > 0 ? "amount of the blend" : "amount of the remainder",
          .formula = sign > 0 ? "n = n_a + n_b" : "n = n_a - n_b", .value = made->moles,
          .unit = unit, .source = "balance of amounts",
          STEP_SYMBOLS (SYMBOL ("n_a", a->moles, unit), SYMBOL ("n_b", b->moles, unit)));
  if (!(made->moles > 0)) {
    return;
  }
  RECORD (ev, .name = sign > 0 ? "shares of the blend" : "shares of the remainder",
          .formula = sign > 0 ? "x_i = (n_a a_i + n_b b_i)/n" : "x_i = (n_a a_i - n_b b_i)/n",
          .value = UNSTATED, .unit = "mol/mol", .source = "balance of amounts, part by part",
          .term_count = p.count, .terms = p.terms,
          STEP_SYMBOLS (SYMBOL ("n_a", a->moles, unit), SYMBOL ("n_b", b->moles, unit),
                        SYMBOL ("n", made->moles, unit)),
          STEP_COLUMNS ({ "x_i", p.c, "mol/mol", NULL, NULL },
                        { "a_i", p.a, "mol/mol", NULL, NULL },
                        { "b_i", p.b, "mol/mol", NULL, NULL }));
}

void
record_keeping (struct evaluation *ev, const struct stream *source, const double kept[],
                const struct stream *made)
{
  if (!ev->workings) {
    return;
  }
  const struct composition *gas = source->gas;
  const char *unit = moles_unit (source->flow);
  struct parts p = parts_start (ev, gas->count);
  for (size_t i = 0; i < gas->count; i++) {
    size_t at = parts_at (&p, gas->species[i]);
    p.a[at] = gas->fraction[i];
    p.b[at] = kept[i];
    p.c[at] = composition_fraction (made->gas, gas->species[i]);
  }
  const struct step_column a = { "a_i", p.a, "mol/mol", NULL, NULL };
  const struct step_column r = { "r_i", p.b, "mol/mol", STEP_TYPED, NULL };
  RECORD (ev, .name = "amount kept", .formula = "n = n_0 sum(r_i a_i)", .value = made->moles,
          .unit = unit, .source = "balance of amounts, part by part", .term_count = p.count,
          .terms = p.terms, STEP_SYMBOLS (SYMBOL ("n_0", source->moles, unit)),
          STEP_COLUMNS (r, a));
  if (made->moles > 0) {
    RECORD (ev, .name = "shares of what is kept", .formula = "x_i = n_0 r_i a_i/n",
            .value = UNSTATED, .unit = "mol/mol", .source = "balance of amounts, part by part",
            .term_count = p.count, .terms = p.terms,
            STEP_SYMBOLS (SYMBOL ("n_0", source->moles, unit), SYMBOL ("n", made->moles, unit)),
            STEP_COLUMNS ({ "x_i", p.c, "mol/mol", NULL, NULL }, r, a));
  }
}
