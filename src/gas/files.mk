noinst_LIBRARIES += %D%/libgas.a

%C%_libgas_a_SOURCES = \
  %D%/air.c \
  %D%/air.h \
  %D%/analysis.c \
  %D%/analysis.h \
  %D%/analysis_treat.c \
  %D%/composition.c \
  %D%/composition.h \
  %D%/formula.c \
  %D%/formula.h \
  %D%/gathering.c \
  %D%/gathering.h \
  %D%/laboratory.c \
  %D%/laboratory.h \
  %D%/laboratory_amount.c \
  %D%/laboratory_by_component.c \
  %D%/laboratory_by_sample.c \
  %D%/laboratory_heading.c \
  %D%/laboratory_layout.c \
  %D%/laboratory_long.c \
  %D%/laboratory_private.h \
  %D%/moisture.c \
  %D%/moisture.h \
  %D%/name_index.c \
  %D%/name_index.h \
  %D%/naming.c \
  %D%/naming.h \
  %D%/reference.c \
  %D%/reference.h \
  %D%/species.c \
  %D%/species.h \
  %D%/species_private.h \
  %D%/species_read.c
