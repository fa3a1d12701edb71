noinst_LIBRARIES += %D%/libproperty.a

%C%_libproperty_a_SOURCES = \
  %D%/calorific.c \
  %D%/calorific.h \
  %D%/calorific_doubt.c \
  %D%/calorific_formation.c \
  %D%/calorific_private.h \
  %D%/calorific_record.c \
  %D%/calorific_tables.c \
  %D%/emission.c \
  %D%/emission.h \
  %D%/enhancement.c \
  %D%/enhancement.h \
  %D%/figures.c \
  %D%/figures.h \
  %D%/flammability.c \
  %D%/flammability.h \
  %D%/hazard.c \
  %D%/hazard.h \
  %D%/heat_capacity.c \
  %D%/heat_capacity.h \
  %D%/moist.c \
  %D%/moist.h \
  %D%/property_tables.c \
  %D%/property_tables.h \
  %D%/virial.c \
  %D%/virial.h \
  %D%/viscosity.c \
  %D%/viscosity.h
