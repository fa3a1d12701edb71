noinst_LIBRARIES += %D%/libstream.a

%C%_libstream_a_SOURCES = \
  %D%/blend.c \
  %D%/blend.h \
  %D%/stream.c \
  %D%/stream.h
