# Suites of the layer eos.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_eos)

suites += %D%/t_cubic
%C%_t_cubic_SOURCES = \
  %D%/fluids.c \
  %D%/fluids.h \
  %D%/t_cubic.c
%C%_t_cubic_LDADD = $(with_eos)

suites += %D%/t_dew_point
%C%_t_dew_point_SOURCES = \
  %D%/fluids.c \
  %D%/fluids.h \
  %D%/t_dew_point.c
%C%_t_dew_point_LDADD = $(with_eos)

suites += %D%/t_eos
%C%_t_eos_SOURCES = \
  %D%/fluids.c \
  %D%/fluids.h \
  %D%/t_eos.c
%C%_t_eos_LDADD = $(with_eos)

suites += %D%/t_reference
%C%_t_reference_SOURCES = \
  %D%/fluids.c \
  %D%/fluids.h \
  %D%/t_reference.c
%C%_t_reference_LDADD = $(with_eos)

suites += %D%/t_reference_random
%C%_t_reference_random_SOURCES = \
  %D%/fluids.c \
  %D%/fluids.h \
  %D%/t_reference_random.c
%C%_t_reference_random_LDADD = $(with_eos)

suites += %D%/t_table_states
%C%_t_table_states_SOURCES = \
  %D%/fluids.c \
  %D%/fluids.h \
  %D%/t_table_states.c
%C%_t_table_states_LDADD = $(with_eos)

EXTRA_DIST += \
  tests/numbers/peng_robinson.tsv \
  tests/numbers/real_gas.tsv \
  tests/numbers/reference_published.tsv \
  tests/numbers/reference_states.tsv
