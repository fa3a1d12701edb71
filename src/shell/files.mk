bin_PROGRAMS += gaswright
noinst_LIBRARIES += %D%/libshell.a %D%/libterminal.a

gaswright_SOURCES = \
  %D%/main.c \
  %D%/prompt.c \
  %D%/prompt.h
gaswright_LDADD = %D%/libterminal.a $(upto_shell) $(READLINE_LIBS) $(GSL_LIBS)

%C%_libshell_a_SOURCES = \
  %D%/completion.c \
  %D%/completion.h \
  %D%/descriptor.c \
  %D%/descriptor.h \
  %D%/flow_units.def \
  %D%/folders.c \
  %D%/folders.h \
  %D%/history.c \
  %D%/history.h \
  %D%/interrupt.c \
  %D%/interrupt.h \
  %D%/note_file.c \
  %D%/note_file.h \
  %D%/options.c \
  %D%/options.def \
  %D%/options.h \
  %D%/output.c \
  %D%/output.h \
  %D%/pager.c \
  %D%/pager.h \
  %D%/paste.c \
  %D%/paste.h \
  %D%/phrase.c \
  %D%/phrase.h \
  %D%/rows.c \
  %D%/rows.h \
  %D%/script.c \
  %D%/script.h \
  %D%/source.c \
  %D%/source.h \
  %D%/version.c \
  %D%/version.h \
  %D%/wanted.c \
  %D%/wanted.h

# The one file that talks to readline, with the flags readline wants.
%C%_libterminal_a_SOURCES = \
  %D%/terminal.c \
  %D%/terminal.h
%C%_libterminal_a_CPPFLAGS = $(AM_CPPFLAGS) $(READLINE_CFLAGS)
