noinst_LIBRARIES += %D%/libgas.a

%C%_libgas_a_SOURCES = \
  %D%/analysis.c \
  %D%/analysis.h \
  %D%/composition.c \
  %D%/composition.h \
  %D%/moisture.c \
  %D%/moisture.h \
  %D%/reference.c \
  %D%/reference.h \
  %D%/species.c \
  %D%/species.h
