# Suites of the layer gas.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_gas)

suites += %D%/t_air
%C%_t_air_SOURCES = %D%/t_air.c
%C%_t_air_LDADD = $(with_gas)

suites += %D%/t_formula
%C%_t_formula_SOURCES = %D%/t_formula.c
%C%_t_formula_LDADD = $(with_gas)

suites += %D%/t_reference
%C%_t_reference_SOURCES = %D%/t_reference.c
%C%_t_reference_LDADD = $(with_gas)

suites += %D%/t_sources
%C%_t_sources_SOURCES = %D%/t_sources.c
%C%_t_sources_LDADD = $(with_gas)

suites += %D%/t_species
%C%_t_species_SOURCES = %D%/t_species.c
%C%_t_species_LDADD = $(with_gas)

suites += %D%/t_analysis
%C%_t_analysis_SOURCES = \
  %D%/samples.h \
  %D%/t_analysis.c
%C%_t_analysis_LDADD = $(with_gas)

suites += %D%/t_composition
%C%_t_composition_SOURCES = \
  %D%/samples.h \
  %D%/t_composition.c
%C%_t_composition_LDADD = $(with_gas)

suites += %D%/t_moisture
%C%_t_moisture_SOURCES = %D%/t_moisture.c
%C%_t_moisture_LDADD = $(with_gas)

# What the program has for water against python3-iapws, where that is installed.
check_PROGRAMS += %D%/print_pressures
%C%_print_pressures_SOURCES = %D%/print_pressures.c
%C%_print_pressures_LDADD = $(upto_gas)
TESTS += %D%/moisture_library.sh
EXTRA_DIST += %D%/moisture_library.sh

# Molar masses against python3-periodictable, where that is installed.
check_PROGRAMS += %D%/print_masses
%C%_print_masses_SOURCES = %D%/print_masses.c
%C%_print_masses_LDADD = $(upto_gas)
TESTS += %D%/masses_library.sh
EXTRA_DIST += %D%/masses_library.sh
