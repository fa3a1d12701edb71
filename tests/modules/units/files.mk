# Suites of the layer units.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_units)

suites += %D%/t_altitude
%C%_t_altitude_SOURCES = %D%/t_altitude.c
%C%_t_altitude_LDADD = $(with_units)

suites += %D%/t_dimension
%C%_t_dimension_SOURCES = %D%/t_dimension.c
%C%_t_dimension_LDADD = $(with_units)

suites += %D%/t_exact
%C%_t_exact_SOURCES = %D%/t_exact.c
%C%_t_exact_LDADD = $(with_units)

suites += %D%/t_unit
%C%_t_unit_SOURCES = \
  %D%/fixture.c \
  %D%/fixture.h \
  %D%/t_unit.c
%C%_t_unit_LDADD = $(with_units)

suites += %D%/t_unit_factor
%C%_t_unit_factor_SOURCES = \
  %D%/fixture.c \
  %D%/fixture.h \
  %D%/t_unit_factor.c
%C%_t_unit_factor_LDADD = $(with_units)

suites += %D%/t_unit_fault
%C%_t_unit_fault_SOURCES = \
  %D%/fixture.c \
  %D%/fixture.h \
  %D%/t_unit_fault.c
%C%_t_unit_fault_LDADD = $(with_units)

suites += %D%/t_unit_table
%C%_t_unit_table_SOURCES = \
  %D%/fixture.c \
  %D%/fixture.h \
  %D%/t_unit_table.c
%C%_t_unit_table_LDADD = $(with_units)

suites += %D%/t_workings
%C%_t_workings_SOURCES = %D%/t_workings.c
%C%_t_workings_LDADD = $(with_units)

# The factors held against two libraries of units, where they are installed.
check_PROGRAMS += %D%/factors
%C%_factors_SOURCES = \
  %D%/factors.c \
  %D%/fixture.c \
  %D%/fixture.h
%C%_factors_LDADD = $(upto_units)
EXTRA_DIST += %D%/libraries.py %D%/libraries.sh
TESTS += %D%/libraries.sh
