noinst_LIBRARIES += %D%/libgas.a

%C%_libgas_a_SOURCES = \
  %D%/analysis.c \
  %D%/analysis.h \
  %D%/analysis_treat.c \
  %D%/composition.c \
  %D%/composition.h \
  %D%/gathering.c \
  %D%/gathering.h \
  %D%/moisture.c \
  %D%/moisture.h \
  %D%/reference.c \
  %D%/reference.h \
  %D%/species.c \
  %D%/species.h
