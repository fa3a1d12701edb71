# Suites of the layer stream.  One is added by three lines:
#
#   suites += %D%/t_NAME
#   %C%_t_NAME_SOURCES = %D%/t_NAME.c
#   %C%_t_NAME_LDADD = $(with_stream)

suites += %D%/t_blend
%C%_t_blend_SOURCES = \
  %D%/t_blend.c \
  tests/modules/property/gases.c \
  tests/modules/property/gases.h
%C%_t_blend_LDADD = $(with_stream)

suites += %D%/t_stream
%C%_t_stream_SOURCES = %D%/t_stream.c
%C%_t_stream_LDADD = $(with_stream)
