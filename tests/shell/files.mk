# The program as a user and as a script meet it.

EXTRA_DIST += \
  %D%/command_line.sh \
  %D%/exhausted.c \
  %D%/exhausted.sh \
  %D%/terminal.sh
TESTS += %D%/command_line.sh
TESTS += %D%/exhausted.sh
TESTS += %D%/terminal.sh

# Types at the prompt through a pseudo-terminal.
check_PROGRAMS += %D%/typist
%C%_typist_SOURCES = %D%/typist.c
