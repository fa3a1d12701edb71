# The tests.  Every one speaks TAP.

TEST_EXTENSIONS = .sh
LOG_DRIVER = env AM_TAP_AWK='$(AWK)' $(SHELL) $(top_srcdir)/build-aux/tap-driver.sh
SH_LOG_DRIVER = $(LOG_DRIVER)
SH_LOG_COMPILER = $(SHELL)

AM_TESTS_ENVIRONMENT = \
  LC_ALL=C.UTF-8; export LC_ALL; \
  GASWRIGHT='$(abs_top_builddir)/gaswright$(EXEEXT)'; export GASWRIGHT; \
  ASAN_OPTIONS=exitcode=99; export ASAN_OPTIONS; \
  UBSAN_OPTIONS=print_stacktrace=1:exitcode=99; export UBSAN_OPTIONS;

# Suites in C, one program each, linked with the layer they test and those beneath it.
suites =

if HAVE_CUNIT
check_LIBRARIES += %D%/libtest.a
%C%_libtest_a_SOURCES = \
  %D%/libtest.c \
  %D%/libtest.h
%C%_libtest_a_CPPFLAGS = $(AM_CPPFLAGS) $(CUNIT_CFLAGS)
check_PROGRAMS += $(suites)
TESTS += $(suites)
endif
