# Suites of the layer language.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_language)

suites += %D%/t_check
%C%_t_check_SOURCES = \
  %D%/t_check.c \
  %D%/typed.c \
  %D%/typed.h
%C%_t_check_LDADD = $(with_language)

suites += %D%/t_parse
%C%_t_parse_SOURCES = \
  %D%/t_parse.c \
  %D%/tree_print.c \
  %D%/tree_print.h
%C%_t_parse_LDADD = $(with_language)

suites += %D%/t_samples
%C%_t_samples_SOURCES = \
  %D%/t_samples.c \
  %D%/tree_print.c \
  %D%/tree_print.h
%C%_t_samples_LDADD = $(with_language)

suites += %D%/t_uncertainty
%C%_t_uncertainty_SOURCES = \
  %D%/t_uncertainty.c \
  %D%/typed.c \
  %D%/typed.h
%C%_t_uncertainty_LDADD = $(with_language)
