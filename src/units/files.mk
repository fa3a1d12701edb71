noinst_LIBRARIES += %D%/libunits.a

%C%_libunits_a_SOURCES = \
  %D%/altitude.c \
  %D%/altitude.h \
  %D%/constants.h \
  %D%/dimension.c \
  %D%/dimension.h \
  %D%/unit.c \
  %D%/unit.h \
  %D%/workings.c \
  %D%/workings.h
