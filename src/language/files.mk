noinst_LIBRARIES += %D%/liblanguage.a

%C%_liblanguage_a_SOURCES = \
  %D%/parse.c \
  %D%/parse.h \
  %D%/properties.def \
  %D%/session.c \
  %D%/session.h \
  %D%/settings.c \
  %D%/settings.def \
  %D%/settings.h \
  %D%/statements.def \
  %D%/tree.h \
  %D%/words.def
