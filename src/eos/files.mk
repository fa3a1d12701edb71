noinst_LIBRARIES += %D%/libeos.a

%C%_libeos_a_SOURCES = \
  %D%/cubic.c \
  %D%/eos.c \
  %D%/eos.h \
  %D%/ideal.c
