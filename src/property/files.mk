noinst_LIBRARIES += %D%/libproperty.a

%C%_libproperty_a_SOURCES = \
  %D%/hazard.c \
  %D%/hazard.h \
  %D%/moist.c \
  %D%/moist.h
