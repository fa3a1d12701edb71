noinst_LIBRARIES += %D%/libsupport.a

%C%_libsupport_a_SOURCES = \
  %D%/arena.c \
  %D%/arena.h \
  %D%/check.h \
  %D%/csv.c \
  %D%/csv.h \
  %D%/decimal.c \
  %D%/decimal.h \
  %D%/distance.c \
  %D%/draw.c \
  %D%/draw.h \
  %D%/fault.c \
  %D%/fault.h \
  %D%/infile.c \
  %D%/infile.h \
  %D%/map.c \
  %D%/map.h \
  %D%/memory.c \
  %D%/memory.h \
  %D%/message.c \
  %D%/message.h \
  %D%/number.c \
  %D%/number.h \
  %D%/outfile.c \
  %D%/outfile.h \
  %D%/quadratic.c \
  %D%/quadratic.h \
  %D%/reader.c \
  %D%/reader.h \
  %D%/search.h \
  %D%/search_line.c \
  %D%/search_point.c \
  %D%/search_point.h \
  %D%/search_settle.c \
  %D%/seen.c \
  %D%/seen.h \
  %D%/statistics.c \
  %D%/statistics.h \
  %D%/sum.h \
  %D%/table.c \
  %D%/table.h \
  %D%/text.c \
  %D%/text.h \
  %D%/utf8.c \
  %D%/vector.h

nodist_%C%_libsupport_a_SOURCES = \
  made/message_kinds.h \
  made/message_rows.h \
  made/tables.c
