# Suites of the layer balance.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_balance)

suites += %D%/t_agree
%C%_t_agree_SOURCES = \
  %D%/plant.c \
  %D%/plant.h \
  %D%/t_agree.c
%C%_t_agree_LDADD = $(with_balance)

suites += %D%/t_conflict
%C%_t_conflict_SOURCES = \
  %D%/plant.c \
  %D%/plant.h \
  %D%/t_conflict.c
%C%_t_conflict_LDADD = $(with_balance)

suites += %D%/t_elimination
%C%_t_elimination_SOURCES = %D%/t_elimination.c
%C%_t_elimination_LDADD = $(with_balance)

suites += %D%/t_factor
%C%_t_factor_SOURCES = \
  %D%/metered.c \
  %D%/metered.h \
  %D%/t_factor.c
%C%_t_factor_LDADD = $(with_balance)

suites += %D%/t_gross
%C%_t_gross_SOURCES = \
  %D%/metered.c \
  %D%/metered.h \
  %D%/t_gross.c
%C%_t_gross_LDADD = $(with_balance)

suites += %D%/t_large
%C%_t_large_SOURCES = \
  %D%/chain.c \
  %D%/chain.h \
  %D%/metered.c \
  %D%/metered.h \
  %D%/t_large.c
%C%_t_large_LDADD = $(with_balance)

suites += %D%/t_network
%C%_t_network_SOURCES = %D%/t_network.c
%C%_t_network_LDADD = $(with_balance)

suites += %D%/t_null_space
%C%_t_null_space_SOURCES = %D%/t_null_space.c
%C%_t_null_space_LDADD = $(with_balance)

suites += %D%/t_random
%C%_t_random_SOURCES = %D%/t_random.c
%C%_t_random_LDADD = $(with_balance)

suites += %D%/t_rank
%C%_t_rank_SOURCES = \
  %D%/plant.c \
  %D%/plant.h \
  %D%/t_rank.c
%C%_t_rank_LDADD = $(with_balance)

suites += %D%/t_reconcile
%C%_t_reconcile_SOURCES = \
  %D%/metered.c \
  %D%/metered.h \
  %D%/t_reconcile.c
%C%_t_reconcile_LDADD = $(with_balance)

suites += %D%/t_simplex
%C%_t_simplex_SOURCES = %D%/t_simplex.c
%C%_t_simplex_LDADD = $(with_balance)

suites += %D%/t_solve
%C%_t_solve_SOURCES = \
  %D%/plant.c \
  %D%/plant.h \
  %D%/t_solve.c
%C%_t_solve_LDADD = $(with_balance)

suites += %D%/t_system
%C%_t_system_SOURCES = \
  %D%/plant.c \
  %D%/plant.h \
  %D%/t_system.c
%C%_t_system_LDADD = $(with_balance)
