/* `show NAME as picture`: a chart that the shell has drawn into a file.  */
#include "config.h"
#include "language/commands/commands.h"
#include "language/commands/note_chart.h"

#include "language/balance/plant.h"
#include "result/chart.h"
#include "result/result.h"
#include "support/arena.h"
#include "support/fault.h"

static bool
too_large (struct evaluation *ev, const struct statement *s, size_t boxes)
{
  return fault_set_at (ev->fault, MESSAGE_PICTURE_LARGE, s->name_at, s->name,
                       arena_format (ev->arena, "%zu boundaries, of at most %d", boxes,
                                     CHART_BOXES_MOST));
}

/* What `solve` says of it beside the figures stands at the foot of the picture.  */
static const struct chart *
chart_of_balance (struct evaluation *ev, const struct statement *s, const struct plant *plant)
{
  if (plant->boundary_count > CHART_BOXES_MOST) {
    (void) !too_large (ev, s, plant->boundary_count);
    return NULL;
  }
  struct result *result = ev->result;
  ev->result = NULL;
  const struct balance_verdict *verdict = plant_verdict (ev, plant, s->targets);
  ev->result = result;
  return verdict ? balance_chart (ev, plant, verdict, s->targets) : NULL;
}

static const struct chart *
chart_of (struct evaluation *ev, const struct statement *s, struct definition *d)
{
  const struct value *value = NULL;
  if (d->kind == NAME_BALANCE || d->kind == NAME_STREAM) {
    if (!(value = definition_value (ev, d, s->name_at))) {
      return NULL;
    }
    return d->kind == NAME_BALANCE ? chart_of_balance (ev, s, value->plant)
                                   : stream_chart (ev, d, s->targets);
  }
  fault_set_at (ev->fault, MESSAGE_PICTURE_NONE, s->name_at, s->name,
                "it is no balance and no stream");
  return NULL;
}

bool
picture_of (struct session *session, const struct statement *s, struct definition *d,
            struct result *result, struct fault *fault)
{
  struct evaluation ev;
  if (!*s->text) {
    return fault_set_at (fault, MESSAGE_TEXT_EXPECTED, s->text_at, "a file has a name", NULL);
  }
  if (!note_ends_in (s->text, ".svg")) {
    return fault_set_at (fault, MESSAGE_PICTURE_FORM, s->text_at, s->text, NULL);
  }
  evaluation_init (&ev, session, result, fault);
  const struct chart *chart = chart_of (&ev, s, d);
  if (!chart) {
    fault_place (fault, s->name_at);
    return false;
  }
  for (size_t i = 0; i < ev.assumption_count; i++) {
    const struct assumption *a = &ev.assumptions[i];
    struct remark *remark = result_remark (result, a->kind, a->fact[0], a->fact[1]);
    remark->fact[2] = a->fact[2];
    remark->fact[3] = a->fact[3];
  }
  definition_tell (session, d, false, result);
  struct picture **end = &result->picture;
  while (*end) {
    end = &(*end)->next;
  }
  *end = ARENA_NEW (result->arena, struct picture);
  **end = (struct picture) { s->text, chart, note_inputs (session, result->arena), NULL };
  return true;
}
