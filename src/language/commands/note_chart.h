/* Pictures of a session's streams and balances.  */
#ifndef LANGUAGE_COMMANDS_NOTE_CHART_H
#define LANGUAGE_COMMANDS_NOTE_CHART_H

#include "language/session_private.h"

struct balance_verdict; struct chart; struct plant; struct target;

/* All streams.  Null where none is made of others, where there are too many, or where one is
   parted in ways that cannot be at once: the shares taken of it are more than all of it.        */
const struct chart *note_chart (struct session *, struct arena *);
/* A stream and what it is made of, in TARGETS (null: kmol/h).  Kinds picture-none, picture-large,
   and those of a unit the streams cannot be told in.                                            */
const struct chart *stream_chart (struct evaluation *, const struct definition *,
                                  const struct target *) MUST_CHECK;
/* A balance with its verdict, which was told in TARGETS.  (balance_chart.c)  */
const struct chart *balance_chart (const struct evaluation *, const struct plant *,
                                   const struct balance_verdict *, const struct target *);

/* "CH4 54.4, CO2 37.3 mol%": the two largest parts of those that are known; or null.  */
const char *chart_parts (struct arena *, size_t n, const char *const keys[],
                         const double fraction[]);
/* A flow beside a line: five digits.  */
const char *chart_figure (struct arena *, double value);
/* "flows in Nm3/h (ideal-gas Nm3, at 0 degC, 101.325 kPa)".  */
const char *chart_units (const struct evaluation *, const struct target *);

#endif
