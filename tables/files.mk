# The tables of facts: embedded in the program, and installed to be read.

tables = \
  %D%/air.tsv \
  %D%/ambiguous.tsv \
  %D%/cp_ideal.tsv \
  %D%/elements.tsv \
  %D%/exposure.tsv \
  %D%/flammability.tsv \
  %D%/formation.tsv \
  %D%/fuels.tsv \
  %D%/iso6976_1995.tsv \
  %D%/iso6976_2016.tsv \
  %D%/iso6976_constants.tsv \
  %D%/messages.tsv \
  %D%/readings.tsv \
  %D%/reference_names.tsv \
  %D%/references.tsv \
  %D%/sources.tsv \
  %D%/species.tsv \
  %D%/units.tsv \
  %D%/virial.tsv \
  %D%/viscosity.tsv

# The figures of the equations of reference: built into the program as numbers (src/eos).
equation_tables = \
  %D%/aga8_components.tsv \
  %D%/aga8_pairs.tsv \
  %D%/aga8_terms.tsv \
  %D%/gerg_components.tsv \
  %D%/gerg_departure.tsv \
  %D%/gerg_ideal.tsv \
  %D%/gerg_pairs.tsv \
  %D%/gerg_pure.tsv

tablesdir = $(pkgdatadir)/tables
dist_tables_DATA = $(tables) $(equation_tables)

demodir = $(pkgdatadir)/tables/demo
dist_demo_DATA = \
  %D%/demo/cleaned.csv \
  %D%/demo/digester.csv \
  %D%/demo/header.gw \
  %D%/demo/morning.gw \
  %D%/demo/quarrel_blower.gw \
  %D%/demo/quarrel_controller.gw \
  %D%/demo/quarrel_lpg.gw \
  %D%/demo/quarrel_permit.gw \
  %D%/demo/upgrading.gw \
  %D%/demo/week.gw

# Made from the tables, in the build tree only: every table as text, the kinds of message, and
# what stands behind each kind.
BUILT_SOURCES += made/message_kinds.h made/message_rows.h made/tables.c
CLEANFILES += made/message_kinds.h made/message_rows.h made/tables.c
EXTRA_DIST += \
  src/support/embed.awk \
  src/support/message_kinds.awk \
  src/support/rows.awk

made/tables.c: $(tables) src/support/embed.awk src/support/rows.awk
	$(AM_V_GEN)$(MKDIR_P) made \
	  && (cd $(srcdir) && LC_ALL=C $(AWK) -f src/support/rows.awk -f src/support/embed.awk \
	        $(tables)) > made/tables.new \
	  && mv -f made/tables.new $@

made/message_kinds.h: %D%/messages.tsv src/support/message_kinds.awk src/support/rows.awk
	$(AM_V_GEN)$(MKDIR_P) made \
	  && (cd $(srcdir) && LC_ALL=C $(AWK) -v make=kinds -f src/support/rows.awk \
	        -f src/support/message_kinds.awk %D%/messages.tsv) > made/kinds.new \
	  && mv -f made/kinds.new $@

made/message_rows.h: %D%/messages.tsv src/support/message_kinds.awk src/support/rows.awk
	$(AM_V_GEN)$(MKDIR_P) made \
	  && (cd $(srcdir) && LC_ALL=C $(AWK) -v make=rows -f src/support/rows.awk \
	        -f src/support/message_kinds.awk %D%/messages.tsv) > made/rows.new \
	  && mv -f made/rows.new $@
