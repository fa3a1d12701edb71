noinst_LIBRARIES += %D%/libbalance.a

%C%_libbalance_a_SOURCES = \
  %D%/absent.c \
  %D%/absent.h \
  %D%/network.c \
  %D%/network.h \
  %D%/rank.c \
  %D%/rank.h \
  %D%/solution.h \
  %D%/system.c \
  %D%/system.h
