/* The session at a terminal: asks, answers, until the end.  */
#ifndef SHELL_PROMPT_H
#define SHELL_PROMPT_H

#include <stdbool.h>

struct script;

/* Runs the user's file of settings, unless there is none or WITHOUT_INIT, then what is typed.  */
void prompt_run (struct script *, bool without_init);

#endif
