# Lines that nobody would type: a short run of fixed seed with the tests, and `make fuzz` for clang.
check_PROGRAMS += %D%/mutate
%C%_mutate_SOURCES = \
  %D%/lines.c \
  %D%/lines.h \
  %D%/mutate.c
%C%_mutate_LDADD = src/report/libreport.a $(upto_language) $(GSL_LIBS)

check_PROGRAMS += %D%/mutate_cells
%C%_mutate_cells_SOURCES = \
  %D%/cells.c \
  %D%/cells.h \
  %D%/mutate_cells.c
%C%_mutate_cells_LDADD = $(upto_gas) $(GSL_LIBS)

EXTRA_DIST += \
  %D%/blocks.gw \
  %D%/by_component.csv \
  %D%/fuzz.sh \
  %D%/fuzz_cells.sh \
  %D%/in_long.csv \
  %D%/libfuzzer.c \
  %D%/libfuzzer_cells.c
TESTS += %D%/fuzz.sh %D%/fuzz_cells.sh
CLEANFILES += %D%/fuzz %D%/fuzz_cells

.PHONY: fuzz
fuzz: $(BUILT_SOURCES)
	clang -std=c17 -g -O1 -fsanitize=fuzzer,address,undefined -fno-sanitize-recover=all \
	  -I. $(AM_CPPFLAGS) $(GSL_CFLAGS) $(srcdir)/%D%/lines.c $(srcdir)/%D%/libfuzzer.c \
	  made/tables.c $$(find $(srcdir)/src -name '*.c' ! -path '*/shell/*') -o %D%/fuzz \
	  $(GSL_LIBS) -lm
	clang -std=c17 -g -O1 -fsanitize=fuzzer,address,undefined -fno-sanitize-recover=all \
	  -I. $(AM_CPPFLAGS) $(GSL_CFLAGS) $(srcdir)/%D%/cells.c $(srcdir)/%D%/libfuzzer_cells.c \
	  made/tables.c $$(find $(srcdir)/src/support $(srcdir)/src/units $(srcdir)/src/gas -name '*.c') \
	  -o %D%/fuzz_cells $(GSL_LIBS) -lm
