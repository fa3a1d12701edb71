/* What goes round: a component that has one way out of a loop builds up before it.  */
#include "config.h"
#include "language/balance/verdict_private.h"

#include <math.h>
#include "result/result.h"
#include "support/arena.h"

/* So many times what is fed is worth a word: common practice, no source.  */
static const double builds_up = 3;

/* A component of all streams: fed from outside, the largest flow inside, and the ways out.  */
struct way { double fed, inside; size_t outs, out; };

static struct way
way_of (const struct verdict_maker *m, size_t c)
{
  const struct plant *plant = m->plant;
  struct way way = { 0, 0, 0, NO_STREAM };
  double largest = 0;
  for (size_t s = 0; s < plant->stream_count; s++) {
    largest = fmax (largest, m->solution->value[s * plant->network.components + c]);
  }
  for (size_t s = 0; s < plant->stream_count; s++) {
    const struct plant_stream *stream = &plant->stream[s];
    const double flow = m->solution->value[s * plant->network.components + c];
    if (stream->from == NO_BOUNDARY) {
      way.fed += flow;
    } else if (stream->to != NO_BOUNDARY) {
      way.inside = fmax (way.inside, flow);
    } else if (flow > 1e-9 * largest) {
      way.outs++;
      way.out = s;
    }
  }
  return way;
}

void
verdict_round (struct verdict_maker *m)
{
  const struct plant *plant = m->plant;
  if (!m->ev->result || m->solution->count.missing > 0 || plant->whole
      || m->solution->status == BALANCE_CONTRADICTORY) {
    return;
  }
  for (size_t c = 0; c < plant->network.components; c++) {
    const struct way way = way_of (m, c);
    if (way.outs == 1 && way.fed > 0 && way.inside > builds_up * way.fed) {
      struct remark *remark = result_remark (m->ev->result, MESSAGE_NOTE_GOES_ROUND,
                                             component_text (plant, c),
                                             plant->stream[way.out].name);
      remark->fact[2] = rough_text (m->arena, way.inside / way.fed);
    }
  }
}
