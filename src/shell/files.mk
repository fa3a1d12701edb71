bin_PROGRAMS += gaswright
noinst_LIBRARIES += %D%/libshell.a %D%/libterminal.a

gaswright_SOURCES = %D%/main.c
gaswright_LDADD = %D%/libterminal.a $(upto_shell) $(READLINE_LIBS) $(GSL_LIBS)

%C%_libshell_a_SOURCES =

# The one file that talks to readline, with the flags readline wants.
%C%_libterminal_a_SOURCES = \
  %D%/terminal.c \
  %D%/terminal.h
%C%_libterminal_a_CPPFLAGS = $(AM_CPPFLAGS) $(READLINE_CFLAGS)
