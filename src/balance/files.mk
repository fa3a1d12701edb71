noinst_LIBRARIES += %D%/libbalance.a

%C%_libbalance_a_SOURCES = \
  %D%/absent.c \
  %D%/absent.h \
  %D%/agree.c \
  %D%/bend.c \
  %D%/column_order.c \
  %D%/column_order.h \
  %D%/conflict.c \
  %D%/conflict.h \
  %D%/core.c \
  %D%/core.h \
  %D%/factor.c \
  %D%/factor.h \
  %D%/factor_dense.c \
  %D%/factor_sparse.c \
  %D%/factor_way.h \
  %D%/fixed.c \
  %D%/fixed.h \
  %D%/fronts.c \
  %D%/fronts.h \
  %D%/gross.c \
  %D%/gross.h \
  %D%/measured.c \
  %D%/measured.h \
  %D%/minimise.c \
  %D%/minimise.h \
  %D%/network.c \
  %D%/network.h \
  %D%/program.c \
  %D%/program.h \
  %D%/rank.c \
  %D%/rank.h \
  %D%/reconcile.c \
  %D%/reconcile.h \
  %D%/solution.h \
  %D%/solve.c \
  %D%/suggest.c \
  %D%/suggest.h \
  %D%/suspect.c \
  %D%/system.c \
  %D%/system.h \
  %D%/tangent.c \
  %D%/uncertainty.c \
  %D%/uncertainty.h
