noinst_LIBRARIES += %D%/libunits.a

%C%_libunits_a_SOURCES = \
  %D%/altitude.c \
  %D%/altitude.h \
  %D%/constants.h \
  %D%/dimension.c \
  %D%/dimension.h \
  %D%/dimension_text.c \
  %D%/exact.c \
  %D%/exact.h \
  %D%/unit.c \
  %D%/unit.h \
  %D%/unit_ascii.c \
  %D%/unit_read.c \
  %D%/unit_suggest.c \
  %D%/unit_table.c \
  %D%/unit_table.h \
  %D%/workings.c \
  %D%/workings.h
