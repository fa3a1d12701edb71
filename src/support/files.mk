noinst_LIBRARIES += %D%/libsupport.a

%C%_libsupport_a_SOURCES = \
  %D%/arena.c \
  %D%/arena.h \
  %D%/check.h \
  %D%/fault.c \
  %D%/fault.h \
  %D%/map.c \
  %D%/map.h \
  %D%/message.c \
  %D%/message.h \
  %D%/number.c \
  %D%/number.h \
  %D%/reader.c \
  %D%/reader.h \
  %D%/table.c \
  %D%/table.h \
  %D%/text.c \
  %D%/text.h

nodist_%C%_libsupport_a_SOURCES = \
  made/message_kinds.h \
  made/message_rows.h \
  made/tables.c
