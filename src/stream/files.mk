noinst_LIBRARIES += %D%/libstream.a

%C%_libstream_a_SOURCES = \
  %D%/stream.c \
  %D%/stream.h
