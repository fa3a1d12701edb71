/* Signals that ask the program to stop.

   A handler only sets a flag; whoever works or waits looks at it.  At a prompt Ctrl-C ends what is
   going on and no more.  Elsewhere the run ends, and the signal is raised again once answers and
   temporary files are in order; a second one ends the program at once.                          */
#ifndef SHELL_INTERRUPT_H
#define SHELL_INTERRUPT_H

#include <stdbool.h>

/* From now on SIGINT sets the flag, and without a prompt SIGTERM and SIGHUP do too.  Calls that
   wait come back with EINTR.                                                                   */
void interrupt_catch (bool at_prompt);

/* Has a signal asked to stop?  */
bool interrupt_pending (void);
/* Waits until FD is ready for EVENTS (of poll) or a signal has come, be it just before: those are
   let in only while it waits, so that none is lost between the look and the wait.  Is FD ready?  */
bool interrupt_wait (int fd, short events);
void interrupt_forget (void);

/* Raises the signal that came again, with its usual effect; returns if none came.  */
void interrupt_pass_on (void);

#endif
