noinst_LIBRARIES += %D%/libbalance.a

%C%_libbalance_a_SOURCES = \
  %D%/absent.c \
  %D%/absent.h \
  %D%/factor.c \
  %D%/factor.h \
  %D%/factor_dense.c \
  %D%/factor_way.h \
  %D%/gross.c \
  %D%/gross.h \
  %D%/measured.c \
  %D%/measured.h \
  %D%/minimise.c \
  %D%/minimise.h \
  %D%/network.c \
  %D%/network.h \
  %D%/rank.c \
  %D%/rank.h \
  %D%/reconcile.c \
  %D%/reconcile.h \
  %D%/solution.h \
  %D%/system.c \
  %D%/system.h \
  %D%/tangent.c \
  %D%/uncertainty.c \
  %D%/uncertainty.h
