# Lines that nobody would type: a short run of fixed seed with the tests, and `make fuzz` for clang.
check_PROGRAMS += %D%/mutate
%C%_mutate_SOURCES = \
  %D%/lines.c \
  %D%/lines.h \
  %D%/mutate.c
%C%_mutate_LDADD = src/report/libreport.a $(upto_language) $(GSL_LIBS)

EXTRA_DIST += %D%/fuzz.sh %D%/libfuzzer.c
TESTS += %D%/fuzz.sh
CLEANFILES += %D%/fuzz

.PHONY: fuzz
fuzz: $(BUILT_SOURCES)
	clang -std=c17 -g -O1 -fsanitize=fuzzer,address,undefined -fno-sanitize-recover=all \
	  -I. $(AM_CPPFLAGS) $(GSL_CFLAGS) $(srcdir)/%D%/lines.c $(srcdir)/%D%/libfuzzer.c \
	  made/tables.c $$(find $(srcdir)/src -name '*.c' ! -path '*/shell/*') -o %D%/fuzz \
	  $(GSL_LIBS) -lm
