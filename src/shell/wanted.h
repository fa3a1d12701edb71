/* Which units fit a place: in a state those of a state, behind `in` those the question can be
   answered in, as far as its words tell.                                                        */
#ifndef SHELL_WANTED_H
#define SHELL_WANTED_H

#include <stdbool.h>
#include "support/check.h"

struct phrase; struct unit; struct unit_table;

enum wanted_kind {
  WANTED_ANY,
  WANTED_STATE,                   /* temperatures, pressures, humidity, oxygen */
  WANTED_SAME,                    /* the dimension of `unit` */
  WANTED_FLOW, WANTED_AMOUNT      /* a flow, an amount of gas, on any basis */
};

struct wanted { enum wanted_kind kind; const struct unit *unit; };

struct wanted wanted_at (const struct phrase *, struct unit_table *);
bool wanted_fits (const struct wanted *, const struct unit *) MUST_CHECK;

#endif
