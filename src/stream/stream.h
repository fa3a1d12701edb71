/* A flow or an amount of a gas, at a state or without one.

   Kept as moles (mol/s or mol) of the gas with its water.  A stream is a value: functions make
   new ones in the arena given.  Compositions are borrowed.  T in K, p in Pa.                    */
#ifndef STREAM_STREAM_H
#define STREAM_STREAM_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"
#include "gas/reference.h"

struct arena; struct composition; struct fault; struct species;

struct stream {
  const struct composition *gas;
  double moles;                            /* mol/s, or mol if not `flow` */
  bool flow;
  double T, p;                             /* NAN: not stated */
  double Z;                                /* as given by the user; NAN: by the gas model */
};

double stream_mass (const struct stream *);                              /* kg/s or kg */
/* Ideal-gas volume at reference conditions, m3/s or m3; of MOLES.  */
double ideal_volume (double moles, struct conditions);
double ideal_moles (double volume, struct conditions);

/* Without, or with other, water: the dry flow stays.  WATER is the species H2O.  */
bool stream_with_water (struct arena *, const struct stream *, const struct species *water,
                        double y, struct stream *, struct fault *) MUST_CHECK;
double stream_dry_moles (const struct stream *, const struct species *water);

/* A blend: parts add up; the pressure is the lowest of both if both are known; the temperature
   stays unstated (the adiabatic one needs heat capacities) unless both are equal.  Kind
   kind-wrong if one is a flow and the other an amount.                                         */
bool stream_blend (struct arena *, const struct stream *, const struct stream *,
                   struct stream *, struct fault *) MUST_CHECK;
/* FRACTION (by amount) of a stream, same composition and state.  */
struct stream stream_share (const struct stream *, double fraction);
/* What is left of A without B, part by part; keeps A's state.  A part below zero by more than
   1e-12 of A is kind negative-part (facts: the species).                                       */
bool stream_remainder (struct arena *, const struct stream *a, const struct stream *b,
                       struct stream *, struct fault *) MUST_CHECK;
/* Component recoveries: KEPT[i] (0 to 1) of the i-th species of the stream's gas.  State kept.  */
bool stream_keeping (struct arena *, const struct stream *, const double kept[],
                     struct stream *, struct fault *) MUST_CHECK;

#endif
