noinst_LIBRARIES += %D%/libeos.a

%C%_libeos_a_SOURCES = \
  %D%/aga8.c \
  %D%/aga8.h \
  %D%/aga8_range.c \
  %D%/aga8_table.c \
  %D%/aga8_table.h \
  %D%/caloric.c \
  %D%/caloric.h \
  %D%/cover.c \
  %D%/cover.h \
  %D%/cubic.c \
  %D%/cubic.h \
  %D%/dew_point.c \
  %D%/dew_point.h \
  %D%/eos.c \
  %D%/eos.h \
  %D%/eos_record.c \
  %D%/gerg.c \
  %D%/gerg.h \
  %D%/gerg_table.c \
  %D%/gerg_table.h \
  %D%/helmholtz.c \
  %D%/helmholtz.h \
  %D%/helmholtz_batch.c \
  %D%/helmholtz_lanes.def \
  %D%/helmholtz_roots.c \
  %D%/ideal.c

# The figures of the equations of reference, made from their tables.
gerg_tables = \
  tables/gerg_components.tsv \
  tables/gerg_ideal.tsv \
  tables/gerg_pure.tsv \
  tables/gerg_departure.tsv \
  tables/gerg_pairs.tsv
aga8_tables = \
  tables/aga8_components.tsv \
  tables/aga8_pairs.tsv \
  tables/aga8_terms.tsv
BUILT_SOURCES += made/aga8_rows.h made/gerg_rows.h
CLEANFILES += made/aga8_rows.h made/gerg_rows.h
EXTRA_DIST += %D%/equation_rows.awk

made/gerg_rows.h: $(gerg_tables) %D%/equation_rows.awk src/support/rows.awk
	$(AM_V_GEN)$(MKDIR_P) made \
	  && (cd $(srcdir) && LC_ALL=C $(AWK) -v make=gerg -f src/support/rows.awk \
	        -f %D%/equation_rows.awk \
	        $(gerg_tables)) > made/gerg.new \
	  && mv -f made/gerg.new $@

made/aga8_rows.h: $(aga8_tables) %D%/equation_rows.awk src/support/rows.awk
	$(AM_V_GEN)$(MKDIR_P) made \
	  && (cd $(srcdir) && LC_ALL=C $(AWK) -v make=aga8 -f src/support/rows.awk \
	        -f %D%/equation_rows.awk \
	        $(aga8_tables)) > made/aga8.new \
	  && mv -f made/aga8.new $@
