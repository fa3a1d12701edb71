# Suites of the layer property.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_property)

suites += %D%/t_calorific
%C%_t_calorific_SOURCES = %D%/t_calorific.c
%C%_t_calorific_LDADD = $(with_property)

suites += %D%/t_emission
%C%_t_emission_SOURCES = \
  %D%/gases.c \
  %D%/gases.h \
  %D%/t_emission.c
%C%_t_emission_LDADD = $(with_property)

suites += %D%/t_enhancement
%C%_t_enhancement_SOURCES = \
  %D%/gases.c \
  %D%/gases.h \
  %D%/t_enhancement.c
%C%_t_enhancement_LDADD = $(with_property)

suites += %D%/t_flammability
%C%_t_flammability_SOURCES = \
  %D%/gases.c \
  %D%/gases.h \
  %D%/t_flammability.c
%C%_t_flammability_LDADD = $(with_property)

suites += %D%/t_hazard
%C%_t_hazard_SOURCES = %D%/t_hazard.c
%C%_t_hazard_LDADD = $(with_property)

suites += %D%/t_heat_capacity
%C%_t_heat_capacity_SOURCES = \
  %D%/gases.c \
  %D%/gases.h \
  %D%/t_heat_capacity.c
%C%_t_heat_capacity_LDADD = $(with_property)

suites += %D%/t_moist
%C%_t_moist_SOURCES = %D%/t_moist.c
%C%_t_moist_LDADD = $(with_property)

suites += %D%/t_virial
%C%_t_virial_SOURCES = \
  %D%/gases.c \
  %D%/gases.h \
  %D%/t_virial.c
%C%_t_virial_LDADD = $(with_property)

suites += %D%/t_viscosity
%C%_t_viscosity_SOURCES = \
  %D%/gases.c \
  %D%/gases.h \
  %D%/t_viscosity.c
%C%_t_viscosity_LDADD = $(with_property)
