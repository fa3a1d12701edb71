noinst_LIBRARIES += %D%/libbalance.a

%C%_libbalance_a_SOURCES = \
  %D%/network.c \
  %D%/network.h \
  %D%/solution.h
