/* What the user may set, and what it is when nothing was set.

   A value type: copies are independent, so an answer can be worked out again under other settings
   (what would the usual alternative do?) without touching the session.                          */
#ifndef LANGUAGE_SETTINGS_H
#define LANGUAGE_SETTINGS_H

#include <stdbool.h>
#include "eos/eos.h"
#include "gas/reference.h"
#include "language/tree.h"
#include "units/unit.h"

struct species;

enum below_detection { BELOW_ZERO, BELOW_HALF, BELOW_LIMIT };

/* What a reference family stands for: conditions, and how they are written.  */
struct family_setting { struct conditions at; const char *text; bool set; const char *source; };

/* What is tried in place of what was typed while a check looks for another reading of it; all
   zero (and null) but then.                                                                     */
struct trial {
  bool gauge_absolute, absolute_gauge;     /* a gauge figure read as absolute, and the reverse */
  bool dry, wet;                           /* flows are counted so, whatever their words */
  bool no_moisture;                        /* the moisture of states is left out */
  bool vapour_atmospheric;                 /* the vapour fraction is that at 101.325 kPa */
  bool other_heat;                         /* net for gross, and the reverse */
  bool no_oxygen;                          /* no correction to a reference oxygen */
  bool wet_oxygen;                         /* the oxygen of that correction is of the wet gas */
  bool Z_out, Z_inverse;                   /* compressibility left out; multiplied for divided */
  double ice_point;                        /* K of 0 degC */
  const char *from, *to;                   /* a word of units read as another */
  const struct node *counted_as;           /* of a component */
  double T, p, humidity, Z;                /* of every state that says one: K, Pa, 0 to 1, 1 */
};

/* A lower flammable limit the user states in place of the table's; in the order they were set.  */
struct stated_limit {
  const struct species *species;
  const struct node *figure;               /* a share, maybe uncertain */
  const char *source;                      /* the statement that set it */
  const struct stated_limit *next;
};

struct settings {
  /* That of FAMILY_NONE is for volumes whose state nobody said; as shipped there is none.  */
  struct family_setting family[FAMILY_COUNT];
  double site_pressure;                    /* Pa */
  const char *site_pressure_text;          /* as it was set; null: as shipped */
  const struct node *site_pressure_spread; /* the figure set, if it is uncertain; or null */
  double site_altitude;                    /* m; NAN: the pressure was not estimated from it */
  const char *site_altitude_text;
  enum gas_model model;
  bool real_volumes;
  double oxygen_in_air;                    /* mol/mol */
  double water_in_air;                     /* mol/mol, of emissions by a wet F factor */
  double total_tolerance;                  /* relative */
  enum below_detection below;
  double combustion;                       /* K */
  bool calorific_1995;
  const struct stated_limit *limits;       /* that replace those of the table; or null */
  bool parts_independent;                  /* a list with one part moved is not closed again */
  bool constants_uncertain;                /* figures of tables and equations are sources too */
  double coverage;                         /* uncertainties are shown times this */
  double smallest_effect;                  /* relative: less than that is not listed */
  int digits;
  bool ignore_total;                       /* while a figure is moved by its uncertainty */
  bool bare_is_gauge;                      /* while the gauge reading of bare pressures is tried */
  double vapour_factor;                    /* 1, but while it is tried whether water matters */
  bool dew_over_liquid;                    /* while dew points below 0 degC are tried so */
  struct trial trial;
  bool is_set[SETTING_COUNT];              /* changed by the user */
  const char *source[SETTING_COUNT];       /* the statement that set it, for `save` */
};

/* As shipped: language.md's "Meanings and defaults".  */
void settings_init (struct settings *);
bool settings_changed (const struct settings *);

#endif
