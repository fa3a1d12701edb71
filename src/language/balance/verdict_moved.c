/* Figures that agree only within the digits they are typed with: what each is counted as.  */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <math.h>
#include "result/result.h"
#include "support/arena.h"

/* What moves by less than this part of a figure is rounding of ours.  */
static const double still = 1e-7;

/* As many as are told one by one, the largest first.  */
enum { TOLD_MOST = 3 };

/* One figure: stated, and as it came out, in the fact's own terms.  */
struct moved { size_t fact, component; double stated, here, by; };

static double
total_of (const struct verdict_maker *m, size_t stream)
{
  double sum = 0;
  for (size_t c = 0; c < m->plant->network.components; c++) {
    sum += m->solution->value[stream * m->plant->network.components + c];
  }
  return sum;
}

static double
fact_here (const struct verdict_maker *m, const struct fact *fact)
{
  const double *v = m->solution->value;
  switch (fact->kind) {
  case FACT_FORM:
    return form_value (&fact->left, v);
  case FACT_RATIO:
    return form_value (&fact->left, v) / form_value (&fact->right, v);
  case FACT_SHARE:
    return total_of (m, fact->stream) / total_of (m, fact->of);
  case FACT_COMPOSITION:
    break;
  }
  return (double) NAN;
}

static void
meet (struct moved told[], size_t *count, size_t *all, struct moved one)
{
  if (!(fabs (one.here - one.stated) > still * fabs (one.stated))) {
    return;
  }
  ++*all;
  size_t k = *count < TOLD_MOST ? (*count)++ : TOLD_MOST - 1;
  if (k == TOLD_MOST - 1 && *all > TOLD_MOST && told[k].by >= one.by) {
    return;
  }
  for (; k > 0 && told[k - 1].by < one.by; k--) {
    told[k] = told[k - 1];
  }
  told[k] = one;
}

static void
meet_fact (const struct verdict_maker *m, size_t f, struct moved told[], size_t *count,
           size_t *all)
{
  const struct fact *fact = &m->plant->network.fact[f];
  const size_t n = m->plant->network.components;
  if (fact->kind != FACT_COMPOSITION) {
    const double here = isnan (fact->u) ? fact_here (m, fact) : fact->value;
    meet (told, count, all, (struct moved) { f, n, fact->value, here,
                                             fabs (here / fact->value - 1) });
    return;
  }
  const double total = total_of (m, fact->stream);
  for (size_t c = 0; c < n; c++) {
    const double stated = fact->fractions[c];
    const bool exact = !fact->fractions_u || isnan (fact->fractions_u[c]);
    const double here = m->solution->value[fact->stream * n + c] / total;
    if (exact && stated > 0) {
      meet (told, count, all, (struct moved) { f, c, stated, here, fabs (here / stated - 1) });
    }
  }
}

static void
tell (const struct verdict_maker *m, const struct moved *one)
{
  const char *here = fact_value_text (m, one->fact, one->here);
  const bool part = one->component < m->plant->network.components;
  result_remark (m->ev->result, MESSAGE_NOTE_WITHIN_DIGITS, m->plant->fact[one->fact].text,
                 part ? arena_format (m->arena, "%s %s", component_text (m->plant, one->component),
                                      here) : here);
}

void
verdict_moved (struct verdict_maker *m)
{
  struct moved told[TOLD_MOST];
  size_t count = 0, all = 0;
  const enum balance_status status = m->solution->status;
  if (!m->ev->result || m->solution->count.surplus == 0 || status == BALANCE_CONTRADICTORY
      || status == BALANCE_RECONCILED) {
    return;
  }
  for (size_t f = 0; f < m->plant->fact_count; f++) {
    meet_fact (m, f, told, &count, &all);
  }
  for (size_t i = 0; i < count; i++) {
    tell (m, &told[i]);
  }
  if (all > count) {
    result_remark (m->ev->result, MESSAGE_NOTE_WITHIN_DIGITS_MORE,
                   arena_format (m->arena, all - count == 1 ? "%zu more figure is" : "%zu more "
                                 "figures are", all - count), NULL);
  }
}
