#include "config.h"
#include "balance/absent.h"

#include <math.h>
#include "support/arena.h"

/* Marks a column; was it news?  */
static bool
mark (struct absence *absence, size_t column, size_t cause)
{
  if (absence->absent[column]) {
    return false;
  }
  absence->absent[column] = true;
  absence->cause[column] = cause;
  return true;
}

static void
undeclared (const struct network *network, const bool take[], struct absence *absence)
{
  for (size_t i = 0; i < network->streams * network->components; i++) {
    size_t by = network->denied ? network->denied[i] : NOWHERE;
    if (network->possible && !network->possible[i]) {
      if (by == NOWHERE) {
        mark (absence, i, NOWHERE);
      } else if (take[by]) {
        mark (absence, i, by);
      }
    }
  }
}

/* Adds FACTOR times a form to HAVE, a number for each column.  */
static void
gather (const struct form *form, double factor, double have[])
{
  for (size_t i = 0; i < form->count; i++) {
    have[form->terms[i].column] += factor * form->terms[i].coefficient;
  }
}

/* Of what sign are the coefficients of what can be there?  Extents have either.  */
static void
look (const struct network *network, const struct absence *absence, const struct form *form,
      const double have[], bool signs[2])
{
  size_t flows = network->streams * network->components;
  for (size_t i = 0; i < form->count; i++) {
    size_t column = form->terms[i].column;
    bool nothing = !(fabs (have[column]) > 0) || (column < flows && absence->absent[column]);
    signs[0] = signs[0] || (!nothing && (column >= flows || have[column] < 0));
    signs[1] = signs[1] || (!nothing && (column >= flows || have[column] > 0));
  }
}

/* LEFT - FACTOR * RIGHT = 0, with coefficients of one sign: nothing of it is there.  HAVE is room
   for a number for each column, all zero before and after.                                      */
static bool
vanish (const struct network *network, struct absence *absence, size_t cause, double factor,
        double have[])
{
  const struct fact *fact = &network->fact[cause];
  const struct form *forms[] = { &fact->left, &fact->right };
  bool signs[2] = { false, false }, news = false;
  gather (forms[0], 1, have);
  gather (forms[1], -factor, have);
  look (network, absence, forms[0], have, signs);
  look (network, absence, forms[1], have, signs);
  for (size_t f = 0; f < 2; f++) {
    for (size_t i = 0; i < forms[f]->count; i++) {
      size_t column = forms[f]->terms[i].column;
      if (signs[0] != signs[1] && fabs (have[column]) > 0) {
        news = mark (absence, column, cause) || news;
      }
      have[column] = 0;
    }
  }
  return news;
}

static bool
fact_absences (const struct network *network, size_t f, struct absence *absence, double have[])
{
  const struct fact *fact = &network->fact[f];
  bool news = false;
  switch (fact->kind) {
  case FACT_FORM:
    return !(fact->value < 0) && !(fact->value > 0) && vanish (network, absence, f, 0, have);
  case FACT_RATIO:
    return vanish (network, absence, f, fact->value, have);
  case FACT_COMPOSITION:
    for (size_t c = 0; c < network->components; c++) {
      if (!(fact->fractions[c] > 0)) {
        news = mark (absence, fact->stream * network->components + c, f) || news;
      }
    }
    return news;
  case FACT_SHARE:
    for (size_t c = 0; c < network->components && !(fact->value > 0); c++) {
      news = mark (absence, fact->stream * network->components + c, f) || news;
    }
    return news;
  }
  return false;
}

/* Is component C absent from all N streams, or from any?  The fact behind the first in *CAUSE.  */
static bool
is_absent (const struct network *network, const struct absence *absence, size_t n,
           const size_t streams[], size_t c, bool all, size_t *cause)
{
  size_t found = 0;
  for (size_t i = 0; i < n; i++) {
    size_t column = streams[i] * network->components + c;
    if (absence->absent[column]) {
      *cause = found++ == 0 || *cause == NOWHERE ? absence->cause[column] : *cause;
    }
  }
  return all ? found == n : found > 0;
}

static bool
mark_all (const struct network *network, struct absence *absence, size_t n,
          const size_t streams[], size_t c, size_t cause)
{
  bool news = false;
  for (size_t i = 0; i < n; i++) {
    news = mark (absence, streams[i] * network->components + c, cause) || news;
  }
  return news;
}

static bool
reacts (const struct boundary *boundary, size_t c)
{
  for (size_t r = 0; r < boundary->reaction_count; r++) {
    if (fabs (boundary->reactions[r].nu[c]) > 0) {
      return true;
    }
  }
  return false;
}

/* A split whose outlet is nothing says nothing of its other streams: only what is not absent as a
   whole counts for "in all or in none".                                                         */
static bool
is_empty (const struct network *network, const struct absence *absence, size_t stream)
{
  for (size_t c = 0; c < network->components; c++) {
    if (!absence->absent[stream * network->components + c]) {
      return false;
    }
  }
  return true;
}

static bool
split_absences (const struct network *network, const struct boundary *b, size_t c,
                struct absence *absence)
{
  size_t cause = NOWHERE;
  for (size_t i = 0; i < b->inlet_count + b->outlet_count; i++) {
    const size_t *stream = i < b->inlet_count ? &b->inlets[i] : &b->outlets[i - b->inlet_count];
    if (!is_empty (network, absence, *stream)
        && is_absent (network, absence, 1, stream, c, true, &cause)) {
      bool news = mark_all (network, absence, b->inlet_count, b->inlets, c, cause);
      return mark_all (network, absence, b->outlet_count, b->outlets, c, cause) || news;
    }
  }
  return false;
}

static bool
boundary_absences (const struct network *network, const struct boundary *b, size_t c,
                   struct absence *absence)
{
  size_t cause = NOWHERE;
  bool news = false;
  if (reacts (b, c)) {
    return false;
  }
  if (b->kind == BOUNDARY_SPLIT) {
    news = split_absences (network, b, c, absence);
  }
  if (is_absent (network, absence, b->inlet_count, b->inlets, c, true, &cause)) {
    news = mark_all (network, absence, b->outlet_count, b->outlets, c, cause) || news;
  }
  if (is_absent (network, absence, b->outlet_count, b->outlets, c, true, &cause)) {
    news = mark_all (network, absence, b->inlet_count, b->inlets, c, cause) || news;
  }
  return news;
}

struct absence
absence_spread (struct arena *arena, const struct network *network, const bool take[])
{
  size_t columns = network_columns (network);
  struct absence absence = { ARENA_ARRAY (arena, columns, bool),
                             ARENA_ARRAY (arena, columns, size_t) };
  double *have = ARENA_ARRAY (arena, columns, double);
  bool news = true, forwards = true;
  undeclared (network, take, &absence);
  for (; news; forwards = !forwards) {
    news = false;
    for (size_t f = 0; f < network->facts; f++) {
      news = (take[f] && fact_absences (network, f, &absence, have)) || news;
    }
    for (size_t i = 0; i < network->boundaries; i++) {
      size_t b = forwards ? i : network->boundaries - 1 - i;
      for (size_t c = 0; c < network->components; c++) {
        news = boundary_absences (network, &network->boundary[b], c, &absence) || news;
      }
    }
  }
  return absence;
}

/* Are the columns of a form absent, or without a coefficient?  *SAID: one of them is by fact F.  */
static bool
is_gone (const struct absence *absence, const struct form *form, size_t f, const double have[],
         bool *said)
{
  bool gone = true;
  for (size_t i = 0; i < form->count; i++) {
    size_t column = form->terms[i].column;
    *said = *said || (absence->absent[column] && absence->cause[column] == f);
    gone = gone && (absence->absent[column] || !(fabs (have[column]) > 0));
  }
  return gone;
}

static void
clear (const struct form *form, double have[])
{
  for (size_t i = 0; i < form->count; i++) {
    have[form->terms[i].column] = 0;
  }
}

bool
absence_is_all (const struct network *network, const struct absence *absence, size_t f,
                double have[])
{
  const struct fact *fact = &network->fact[f];
  bool said = false, gone = true;
  size_t first = fact->stream * network->components;
  switch (fact->kind) {
  case FACT_FORM:
  case FACT_RATIO:
    gather (&fact->left, 1, have);
    gather (&fact->right, fact->kind == FACT_RATIO ? -fact->value : 0, have);
    gone = is_gone (absence, &fact->left, f, have, &said);
    gone = is_gone (absence, &fact->right, f, have, &said) && gone;
    clear (&fact->left, have);
    clear (&fact->right, have);
    return gone && said;
  case FACT_SHARE:
    for (size_t c = 0; c < network->components; c++) {
      said = said || (absence->absent[first + c] && absence->cause[first + c] == f);
      gone = gone && absence->absent[first + c];
    }
    return gone && said && !(fact->value > 0);
  case FACT_COMPOSITION:
    return false;                       /* its rows are those of what is there */
  }
  return false;
}
