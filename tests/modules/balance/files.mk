# Suites of the layer balance.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_balance)

suites += %D%/t_network
%C%_t_network_SOURCES = %D%/t_network.c
%C%_t_network_LDADD = $(with_balance)
