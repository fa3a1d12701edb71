#include "config.h"
#include "language/commands/commands.h"

#include <math.h>
#include <string.h>
#include "gas/composition.h"
#include "gas/species.h"
#include "language/evaluate/wording.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"

void
card_add_figure (struct result *result, struct card *card, const char *name, double value,
                 const char *unit, const char *basis)
{
  struct cell *cells = card_add_row (result, card, name);
  cells[0].is_number = true;
  cells[0].value = value;
  cells[1].text = unit;
  if (card->columns > 2) {
    cells[2].text = basis ? basis : "";
  }
}

static const char *const property_name[] = {
#define PROPERTY(name, text, unit, help) text,
#include "language/properties.def"
#undef PROPERTY
};

/* The figures of a property of what is called NAME, as a question would answer them; nothing where
   it has none.                                                                                  */
static void
card_add_property (struct session *session, struct result *result, struct card *card,
                   const char *name, enum property property)
{
  struct node of = { .kind = NODE_OF, .at = { 1, 1, 1 } };
  struct node what = { .kind = NODE_PROPERTY, .property = property, .at = of.at };
  struct node whose = { .kind = NODE_NAME, .text = name, .at = of.at };
  struct evaluation ev;
  struct fault unheard;
  struct figures figures = { NULL, 0, 0 };
  struct subject subject = { property_name[property], of.at };
  struct value value;
  of.a = &what;
  of.b = &whose;
  fault_init (&unheard, result->arena);
  evaluation_init (&ev, session, NULL, &unheard);
  if (!evaluate_property (&ev, &of, NULL, &value)
      || !convert_value (&ev, &value, NULL, &subject, &figures)) {
    return;
  }
  for (size_t i = 0; i < figures.count; i++) {
    const struct figure *f = &figures.at[i];
    card_add_figure (result, card, f->what, f->value, f->unit_text, f->basis);
  }
}

/* What a gas is like at the state of a stream.  */
static void
add_properties (struct session *session, struct result *result, struct card *card, bool wet)
{
  static const enum property shown[] = { PROPERTY_DENSITY, PROPERTY_CP, PROPERTY_KAPPA,
                                         PROPERTY_SPEED_OF_SOUND, PROPERTY_VISCOSITY };
  for (size_t i = 0; i < sizeof shown / sizeof shown[0]; i++) {
    card_add_property (session, result, card, card->title, shown[i]);
  }
  if (wet) {
    card_add_property (session, result, card, card->title, PROPERTY_WATER_DEW_POINT);
    card_add_property (session, result, card, card->title, PROPERTY_RELATIVE_HUMIDITY);
  }
}

/* A row of the card: the stream told in a unit, by the same code that answers questions.  */
struct row { const char *name, *unit; unsigned words; };

static bool
add_row (struct evaluation *ev, struct card *card, const struct value *stream,
         const struct row *row)
{
  struct figures figures = { NULL, 0, 0 };
  struct target target = { .unit_text = row->unit, .words = row->words,
                           .at = { 1, 1, 1 } };
  target.unit = unit_find (ev->session->vocabulary.units, row->unit, strlen (row->unit),
                           ev->fault);
  struct subject subject = { card->title, { 1, 1, 1 } };
  if (!target.unit || !convert_value (ev, stream, &target, &subject, &figures)) {
    return false;
  }
  const struct figure *f = &figures.at[0];
  const char *basis = f->basis ? arena_format (ev->arena, "%s, %s", f->moisture, f->basis)
                               : f->moisture;
  card_add_figure (ev->result, card, row->name, f->value, f->unit_text, basis);
  return true;
}

/* The energy it carries, where it burns and that can be told.  */
static void
add_energy (struct evaluation *ev, struct card *card, const struct value *value, bool flow)
{
  static const struct row rows[2][2] = {
    { { "energy", "MJ", WORD_GROSS }, { "energy", "MJ", WORD_NET } },
    { { "energy", "MW", WORD_GROSS }, { "energy", "MW", WORD_NET } } };
  struct fault unheard, *fault = ev->fault;
  double H;
  fault_init (&unheard, ev->arena);
  ev->fault = &unheard;
  if (heat_per_mole (ev, value->stream.gas, false, &H) && H > 0) {
    (void) (add_row (ev, card, value, &rows[flow][0]) && add_row (ev, card, value, &rows[flow][1]));
  }
  ev->fault = fault;
}

static const char *
parts_line (struct arena *arena, const struct composition *gas)
{
  const char *line = "";
  for (size_t i = 0; i < gas->count; i++) {
    line = arena_format (arena, "%s%s%s %s", line, i ? ", " : "", gas->species[i]->key,
                         figure_text (arena, 100 * gas->fraction[i]));
  }
  return arena_format (arena, "%s mol%%", line);
}

static const char *
state_line (struct arena *arena, const struct stream *s)
{
  const char *T = isnan (s->T) ? "temperature not stated" : temperature_text (arena, s->T, false);
  const char *p = isnan (s->p) ? "pressure not stated" : pressure_text (arena, s->p, false);
  return isnan (s->Z) ? arena_format (arena, "at %s, %s", T, p)
                      : arena_format (arena, "at %s, %s, Z %s as given", T, p,
                                      figure_text (arena, s->Z));
}

bool
card_of_stream (struct session *session, const struct stream *stream, const char *name,
                struct result *result, struct fault *fault)
{
  static const char *const headings[] = { "", "", "" };
  static const struct row flows[] = {
    { "mass", "kg/h", 0 }, { "mass, dry", "kg/h", WORD_DRY }, { "moles", "kmol/h", 0 },
    { "normal volume", "Nm3/h", 0 }, { "normal volume, dry", "Nm3/h", WORD_DRY },
    { "standard volume", "Sm3/h", 0 }, { "standard cubic feet", "scfm", 0 } };
  static const struct row amounts[] = {
    { "mass", "kg", 0 }, { "mass, dry", "kg", WORD_DRY }, { "moles", "kmol", 0 },
    { "normal volume", "Nm3", 0 }, { "normal volume, dry", "Nm3", WORD_DRY },
    { "standard volume", "Sm3", 0 }, { "standard cubic feet", "scf", 0 } };
  static const struct row actual[] = { { "actual volume", "m3/h", 0 },
                                       { "actual volume", "m3", 0 } };
  struct value value = value_number (0);
  struct evaluation ev;
  bool wet = composition_fraction (stream->gas, session->water) > 0;
  evaluation_init (&ev, session, result, fault);
  value.kind = VALUE_STREAM;
  value.stream = *stream;
  struct card *card = result_card (result, name,
                                   arena_format (result->arena, "%s, %s, %zu part%s",
                                                 stream->flow ? "stream" : "amount",
                                                 wet ? "wet" : "dry", stream->gas->count,
                                                 stream->gas->count == 1 ? "" : "s"), 3, headings);
  const struct row *rows = stream->flow ? flows : amounts;
  for (size_t i = 0; i < sizeof flows / sizeof flows[0]; i++)
    if ((wet || rows[i].words == 0) && !add_row (&ev, card, &value, &rows[i])) {
      return false;
    }
  if (!isnan (stream->T) && !isnan (stream->p)
      && !add_row (&ev, card, &value, &actual[stream->flow ? 0 : 1])) {
    return false;
  }
  add_energy (&ev, card, &value, stream->flow);
  if (!isnan (stream->T) && !isnan (stream->p)) {
    add_properties (session, result, card, wet);
  }
  card_add_line (result, card, state_line (result->arena, stream));
  card_add_line (result, card, parts_line (result->arena, stream->gas));
  card_add_limits (session, result, card, stream->gas);
  return true;
}

bool
card_of_quantity (struct session *session, const struct statement *s, struct definition *d,
                  struct result *result, struct fault *fault)
{
  static const char *const headings[] = { "", "", "" };
  struct evaluation ev;
  struct figures figures = { NULL, 0, 0 };
  evaluation_init (&ev, session, result, fault);
  struct subject subject = { d->name, s->name_at };
  if (!convert_value (&ev, &d->value, NULL, &subject, &figures)) {
    fault_place (fault, s->name_at);
    return false;
  }
  struct card *card = result_card (result, d->name, "quantity", 3, headings);
  for (size_t i = 0; i < figures.count; i++) {
    card_add_figure (result, card, figures.at[i].what, figures.at[i].value,
                     figures.at[i].unit_text, figures.at[i].basis);
  }
  card_add_line (result, card, d->source);
  return true;
}
