/* The temperature of a blend.  */
#ifndef STREAM_BLEND_H
#define STREAM_BLEND_H

#include <stdbool.h>
#include "support/check.h"

struct fault; struct property_tables; struct species; struct stream; struct workings;

struct blend_temperature {
  double T;                              /* K; NAN: a stream that is not nothing states none */
  const struct species *outside;         /* a part whose heat capacity was used beyond its range at
                                            one of the three temperatures, or null */
};

/* The temperature of two streams blended without heat or work: the enthalpies of the ideal gases
   add up, n_a H_a(T_a) + n_b H_b(T_b) = n_a H_a(T) + n_b H_b(T).  A simplification: it leaves out
   what pressure does to enthalpy (throttling, mixing), and takes no part for condensed.  Both
   streams are flows or both are amounts.  Kind model-lacks for a part without a heat capacity,
   unless both have the same temperature already.  The order of the streams does not matter.     */
bool stream_blend_temperature (struct property_tables *, const struct stream *a,
                               const struct stream *b, struct blend_temperature *,
                               struct workings *, struct fault *) MUST_CHECK;

#endif
