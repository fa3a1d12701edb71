# Suites of the layer result.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_result)

suites += %D%/t_result
%C%_t_result_SOURCES = %D%/t_result.c
%C%_t_result_LDADD = $(with_result)
