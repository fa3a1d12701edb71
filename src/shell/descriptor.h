/* What reading and writing by descriptors have in common.  */
#ifndef SHELL_DESCRIPTOR_H
#define SHELL_DESCRIPTOR_H

#include <stdbool.h>
#include <stddef.h>
#include "support/check.h"

/* Opens what is closed of standard input, output and error so that reading finds nothing and
   writing fails, as no file of ours may take their numbers.                                    */
void descriptor_fill_standard (void);

/* Writes all N bytes.  False with errno; EINTR only if a signal asked to stop.  */
bool descriptor_write (int fd, const char *bytes, size_t n) MUST_CHECK;

/* Why a file cannot be used, in plain words.  */
const char *descriptor_reason (int error);

#endif
