# Suites of the layer property.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_property)

suites += %D%/t_hazard
%C%_t_hazard_SOURCES = %D%/t_hazard.c
%C%_t_hazard_LDADD = $(with_property)

suites += %D%/t_moist
%C%_t_moist_SOURCES = %D%/t_moist.c
%C%_t_moist_LDADD = $(with_property)
