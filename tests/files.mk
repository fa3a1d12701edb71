# The tests.  Every one speaks TAP.

TEST_EXTENSIONS = .sh
LOG_DRIVER = env AM_TAP_AWK='$(AWK)' $(SHELL) $(top_srcdir)/build-aux/tap-driver.sh
SH_LOG_DRIVER = $(LOG_DRIVER)
SH_LOG_COMPILER = $(SHELL)

AM_TESTS_ENVIRONMENT = \
  LC_ALL=C.UTF-8; export LC_ALL; \
  GASWRIGHT='$(abs_top_builddir)/gaswright$(EXEEXT)'; export GASWRIGHT; \
  AWK='$(AWK)'; export AWK; \
  ASAN_OPTIONS=exitcode=99; export ASAN_OPTIONS; \
  UBSAN_OPTIONS=print_stacktrace=1:exitcode=99; export UBSAN_OPTIONS;

# Tests in shell, and what they share.
EXTRA_DIST += %D%/run.sh %D%/tap.sh $(scripts)
scripts = \
  %D%/layers.sh \
  %D%/options.sh \
  %D%/runner.sh \
  %D%/sizes.sh \
  %D%/tables.sh
TESTS += $(scripts)

# Rows of outside figures, read by the suites.
EXTRA_DIST += %D%/numbers

# Suites in C, one program each (tests/modules/LAYER/t_NAME), linked with the runner, the layer they
# test and the layers beneath it: a call upward does not link.
suites =
with_support = %D%/libtest.a $(upto_support) $(CUNIT_LIBS) $(GSL_LIBS)
with_units = %D%/libtest.a $(upto_units) $(CUNIT_LIBS) $(GSL_LIBS)
with_gas = %D%/libtest.a $(upto_gas) $(CUNIT_LIBS) $(GSL_LIBS)
with_eos = %D%/libtest.a $(upto_eos) $(CUNIT_LIBS) $(GSL_LIBS)
with_property = %D%/libtest.a $(upto_property) $(CUNIT_LIBS) $(GSL_LIBS)
with_stream = %D%/libtest.a $(upto_stream) $(CUNIT_LIBS) $(GSL_LIBS)
with_balance = %D%/libtest.a $(upto_balance) $(CUNIT_LIBS) $(GSL_LIBS)
with_result = %D%/libtest.a $(upto_result) $(CUNIT_LIBS) $(GSL_LIBS)
with_language = %D%/libtest.a $(upto_language) $(CUNIT_LIBS) $(GSL_LIBS)
with_report = %D%/libtest.a $(upto_report) $(CUNIT_LIBS) $(GSL_LIBS)
with_shell = %D%/libtest.a $(upto_shell) $(CUNIT_LIBS) $(GSL_LIBS)

include %D%/documents/files.mk
include %D%/modules/support/files.mk
include %D%/modules/units/files.mk
include %D%/modules/gas/files.mk
include %D%/modules/eos/files.mk
include %D%/modules/property/files.mk
include %D%/modules/stream/files.mk
include %D%/modules/balance/files.mk
include %D%/modules/result/files.mk
include %D%/modules/language/files.mk
include %D%/modules/report/files.mk
include %D%/modules/shell/files.mk
include %D%/fuzz/files.mk
include %D%/renderings/files.mk
include %D%/shell/files.mk
include %D%/sessions/files.mk

if HAVE_CUNIT
check_LIBRARIES += %D%/libtest.a
%C%_libtest_a_SOURCES = \
  %D%/libtest.c \
  %D%/libtest.h
%C%_libtest_a_CPPFLAGS = $(AM_CPPFLAGS) $(CUNIT_CFLAGS)
check_PROGRAMS += %D%/runner $(suites)
%C%_runner_SOURCES = %D%/runner.c
%C%_runner_LDADD = %D%/libtest.a $(CUNIT_LIBS)
TESTS += $(suites)
endif

# Speed and memory: make bench.
EXTRA_PROGRAMS = %D%/bench/equations %D%/bench/measure %D%/bench/networks
EXTRA_DIST += %D%/bench/bench.sh
EXTRA_DIST += %D%/bench/typed.awk
%C%_bench_measure_SOURCES = %D%/bench/measure.c
%C%_bench_equations_SOURCES = \
  %D%/bench/equations.c \
  %D%/bench/plain_gerg.c \
  %D%/bench/plain_gerg.h
%C%_bench_equations_LDADD = $(upto_eos) $(GSL_LIBS)
%C%_bench_networks_SOURCES = \
  %D%/bench/networks.c \
  %D%/modules/balance/chain.c \
  %D%/modules/balance/chain.h
%C%_bench_networks_CPPFLAGS = $(AM_CPPFLAGS) -I$(top_srcdir)/tests/modules/balance
%C%_bench_networks_LDADD = $(upto_balance) $(GSL_LIBS)
CLEANFILES += %D%/bench/equations$(EXEEXT) %D%/bench/measure$(EXEEXT) %D%/bench/networks$(EXEEXT)

.PHONY: bench
bench: gaswright$(EXEEXT) %D%/bench/equations$(EXEEXT) %D%/bench/measure$(EXEEXT) \
    %D%/bench/networks$(EXEEXT)
	$(AM_V_at)GASWRIGHT=./gaswright$(EXEEXT) $(SHELL) $(srcdir)/%D%/bench/bench.sh
