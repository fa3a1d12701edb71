/* What a balance is made of, on request: its equations in words, the same as coefficients, and how
   large a wrong figure must be before it is found.                                              */
#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include <string.h>
#include "gas/species.h"
#include "language/balance/plant.h"
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"

static const char *const blank[] = { "" };

static const char *
component_name (const struct plant *plant, size_t c)
{
  return plant->whole ? "the total" : plant->component[c]->key;
}

/* "CH4 of feed"; "extent of reaction 1 of burner".  */
static const char *
column_name (struct arena *arena, const struct plant *plant, size_t column)
{
  size_t n = plant->network.components;
  if (column < n * plant->stream_count) {
    const char *stream = plant->stream[column / n].name;
    return plant->whole ? stream : arena_format (arena, "%s of %s",
                                                 component_name (plant, column % n), stream);
  }
  size_t b = 0;
  while (b + 1 < plant->boundary_count && network_extent (&plant->network, b + 1) <= column) {
    b++;
  }
  return arena_format (arena, "extent of reaction %zu of %s",
                       column - network_extent (&plant->network, b) + 1, plant->boundary[b].name);
}

static const char *
joined (struct arena *arena, const struct plant *plant, const size_t streams[], size_t n, size_t c)
{
  const char *text = "";
  for (size_t i = 0; i < n; i++)
    if (plant->network.possible[plant_column (plant, streams[i], c)]) {
      text = arena_format (arena, "%s%s%s", text, *text ? " + " : "",
                           plant->stream[streams[i]].name);
    }
  return *text ? text : "0";
}

/* What reactions add to a component: "+ 2 x extent of reaction 1".  */
static const char *
made_by_reactions (struct arena *arena, const struct boundary *boundary, size_t c)
{
  const char *text = "";
  for (size_t k = 0; k < boundary->reaction_count; k++) {
    double nu = boundary->reactions[k].nu[c];
    if (fabs (nu) > 0) {
      text = arena_format (arena, "%s %c %s x extent of reaction %zu", text, nu < 0 ? '-' : '+',
                           figure_text (arena, fabs (nu)), k + 1);
    }
  }
  return text;
}

static void
boundary_rows (struct result *result, struct card *card, const struct plant *plant, size_t b)
{
  struct arena *arena = result->arena;
  const struct boundary *boundary = &plant->network.boundary[b];
  for (size_t c = 0; c < plant->network.components; c++) {
    struct cell *cells = card_add_row (result, card,
                                       arena_format (arena, "%s, %s", plant->boundary[b].name,
                                                     component_name (plant, c)));
    cells[0].text = arena_format (arena, "%s%s = %s",
                                  joined (arena, plant, boundary->inlets, boundary->inlet_count, c),
                                  made_by_reactions (arena, boundary, c),
                                  joined (arena, plant, boundary->outlets,
                                          boundary->outlet_count, c));
  }
  if (boundary->kind == BOUNDARY_SPLIT && plant->network.components > 1) {
    card_add_row (result, card, plant->boundary[b].name)[0].text
      = arena_format (arena, "every outlet has the composition of %s",
                      plant->stream[boundary->inlets[0]].name);
  }
}

static void
card_of_equations (const struct plant *plant, struct result *result)
{
  struct card *card = result_card (result, plant->name, "equations of a balance", 1, blank);
  for (size_t b = 0; b < plant->boundary_count; b++) {
    boundary_rows (result, card, plant, b);
  }
  size_t last = (size_t) -1;
  for (size_t f = 0; f < plant->fact_count; f++) {
    const struct plant_fact *fact = &plant->fact[f];
    if ((fact->line > 0 && fact->line == last) || plant->network.fact[f].absence) {
      continue;
    }
    last = fact->line;
    card_add_row (result, card, fact->line ? arena_format (result->arena, "line %zu", fact->line)
                                           : "as defined")[0].text = fact->words;
  }
}

/* ---- Coefficients ---- */

static const char *
form_text (struct arena *arena, const struct plant *plant, const struct form *form, double times,
           const char *before)
{
  const char *text = before;
  for (size_t i = 0; i < form->count; i++) {
    double k = times * form->terms[i].coefficient;
    size_t column = form->terms[i].column;
    if (column < plant->stream_count * plant->network.components
        && !plant->network.possible[column]) {
      continue;
    }
    text = arena_format (arena, "%s%s%s %s", text, *text ? "  " : "",
                         arena_format (arena, "%+.6g", k),
                         column_name (arena, plant, form->terms[i].column));
  }
  return text;
}

static void
matrix_rows (struct result *result, struct card *card, const struct plant *plant, size_t b)
{
  struct arena *arena = result->arena;
  const struct boundary *boundary = &plant->network.boundary[b];
  for (size_t c = 0; c < plant->network.components; c++) {
    const char *text = "";
    for (int side = 0; side < 2; side++) {
      size_t n = side ? boundary->outlet_count : boundary->inlet_count;
      for (size_t i = 0; i < n; i++) {
        size_t s = side ? boundary->outlets[i] : boundary->inlets[i];
        struct term term = { plant_column (plant, s, c), side ? -1 : 1 };
        struct form form = { 1, &term };
        text = form_text (arena, plant, &form, 1, text);
      }
    }
    for (size_t k = 0; k < boundary->reaction_count; k++) {
      struct term term = { network_extent (&plant->network, b) + k, boundary->reactions[k].nu[c] };
      struct form form = { fabs (term.coefficient) > 0 ? 1 : 0, &term };
      text = form_text (arena, plant, &form, 1, text);
    }
    card_add_row (result, card, arena_format (arena, "%s, %s", plant->boundary[b].name,
                                              component_name (plant, c)))[0].text
      = arena_format (arena, "%s  = 0", text);
  }
}

static const char *
fact_row (struct arena *arena, const struct plant *plant, const struct fact *fact)
{
  const char *text = "";
  switch (fact->kind) {
  case FACT_FORM:
    return arena_format (arena, "%s  = %s", form_text (arena, plant, &fact->left, 1, ""),
                         figure_text (arena, fact->value));
  case FACT_RATIO:
    text = form_text (arena, plant, &fact->left, 1, "");
    return arena_format (arena, "%s  = 0", form_text (arena, plant, &fact->right, -fact->value,
                                                      text));
  case FACT_SHARE:
    return arena_format (arena, "+1 %s  %+.6g %s  = 0, component by component",
                         plant->stream[fact->stream].name, -fact->value,
                         plant->stream[fact->of].name);
  case FACT_COMPOSITION:
    for (size_t c = 0; c < plant->network.components; c++)
      if (fact->fractions[c] > 0) {
        text = arena_format (arena, "%s%s%s of it %s", text, *text ? ", " : "",
                             component_name (plant, c), figure_text (arena, fact->fractions[c]));
      }
    return arena_format (arena, "%s: %s", plant->stream[fact->stream].name, text);
  }
  return text;
}

static void
card_of_matrix (const struct plant *plant, struct result *result)
{
  struct card *card = result_card (result, plant->name,
                                   arena_format (result->arena, "coefficients, flows in %s",
                                                 plant->by_mass ? "kg/s" : "mol/s"), 1, blank);
  for (size_t b = 0; b < plant->boundary_count; b++) {
    matrix_rows (result, card, plant, b);
  }
  for (size_t f = 0; f < plant->fact_count; f++) {
    const struct plant_fact *about = &plant->fact[f];
    if (plant->network.fact[f].absence) {
      continue;
    }
    card_add_row (result, card, about->line ? arena_format (result->arena, "line %zu", about->line)
                                            : "as defined")[0].text
      = fact_row (result->arena, plant, &plant->network.fact[f]);
  }
}

/* ---- What a wrong figure must be to be found ---- */

static void
card_of_detectability (const struct plant *plant, struct result *result)
{
  static const char *const headings[] = { "stated u", "found from", "unit" };
  struct arena *arena = result->arena;
  struct card *card = result_card (result, plant->name, "least wrong figures found", 3, headings);
  const struct solution *solution = plant->solution;
  size_t count = solution ? solution->adjustment_count : 0;
  for (size_t i = 0; i < count; i++) {
    const struct adjustment *a = &solution->adjustments[i];
    const struct plant_fact *f = &plant->fact[a->fact];
    bool part = plant->network.fact[a->fact].kind == FACT_COMPOSITION;
    struct cell *cells = card_add_row (result, card,
                                       part ? arena_format (arena, "%s in %s",
                                                            component_name (plant, a->component),
                                                            f->words) : f->words);
    cells[0] = (struct cell) { .value = a->stated_u * f->per, .is_number = true };
    cells[1] = (struct cell) { .value = a->detectable * f->per, .is_number = true };
    if (isnan (a->detectable)) {
      cells[1] = (struct cell) { .text = "nothing checks it" };
    }
    cells[2].text = f->unit;
  }
  card_add_line (result, card, count ? "an error of this size is found in 80 of 100 cases, at 95 %"
                                     : "no figure with +/- checks another");
}

bool
card_of_balance_part (const struct definition *d, const char *part, struct result *result)
{
  const struct plant *plant = d->value.plant;
  if (strcmp (part, "equations") == 0) {
    card_of_equations (plant, result);
  } else if (strcmp (part, "matrix") == 0) {
    card_of_matrix (plant, result);
  } else if (strcmp (part, "detectability") == 0) {
    card_of_detectability (plant, result);
  } else {
    return false;
  }
  return true;
}
