# Suites of the layer shell.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_shell)

suites += %D%/t_typed
%C%_t_typed_SOURCES = %D%/t_typed.c
%C%_t_typed_LDADD = $(with_shell)
