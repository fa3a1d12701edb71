#include "config.h"
#include "support/outfile.h"

#include <errno.h>
#include <fcntl.h>
#include <limits.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "support/memory.h"
#include "support/text.h"

enum { PLAIN_MODE = 0666 };

/* NAME itself or, where it is a link, what it leads to; owned.  */
static char *
final_name (const char *name)
{
  char resolved[PATH_MAX];
  struct text copy;

  text_init (&copy);
  text_add (&copy, realpath (name, resolved) != NULL ? resolved : name);
  return copy.bytes;
}

/* A file beside TARGET with the rights TARGET has or would get.  */
static bool
open_beside (struct outfile *file, mode_t mode)
{
  const char *slash = strrchr (file->target, '/');
  const size_t folder = slash != NULL ? (size_t) (slash - file->target) + 1 : 0;
  struct text name;

  text_init (&name);
  text_add_bytes (&name, file->target, folder);
  text_add_format (&name, ".%s.", file->target + folder);
  text_add_repeated (&name, 'X', 6);    /* what mkstemp replaces */
  file->fd = mkstemp (name.bytes);
  if (file->fd == -1) {
    const int error = errno;

    text_clear (&name);
    errno = error;
    return false;
  }
  file->beside = name.bytes;
  return fchmod (file->fd, mode) == 0;
}

bool
outfile_open (struct outfile *file, const char *name)
{
  struct stat before;
  const mode_t mask = umask (0);
  mode_t mode = PLAIN_MODE & ~mask;
  bool opened;

  umask (mask);
  *file = (struct outfile) { .fd = -1, .target = final_name (name) };
  if (stat (file->target, &before) == 0 && !S_ISREG (before.st_mode)) {
    file->fd = open (file->target, O_WRONLY);
    opened = file->fd != -1;
  } else if (access (file->target, F_OK) == 0 && access (file->target, W_OK) != 0) {
    opened = false;                     /* what may not be written is not replaced either */
  } else {
    if (access (file->target, F_OK) == 0)
      mode = before.st_mode & 07777;
    opened = open_beside (file, mode);
  }
  if (!opened) {
    const int error = errno;

    outfile_drop (file);
    errno = error;
  }
  return opened;
}

bool
outfile_keep (struct outfile *file)
{
  bool kept = close (file->fd) == 0;

  file->fd = -1;
  if (kept && file->beside != NULL) {
    kept = rename (file->beside, file->target) == 0;
    if (kept) {
      memory_release (file->beside);
      file->beside = NULL;
    }
  }
  const int error = errno;
  outfile_drop (file);
  errno = error;
  return kept;
}

void
outfile_drop (struct outfile *file)
{
  if (file->fd != -1)
    close (file->fd);
  if (file->beside != NULL)
    unlink (file->beside);
  memory_release (file->beside);
  memory_release (file->target);
  *file = (struct outfile) { .fd = -1 };
}

bool
outfile_is_input (const char *name, const char *input)
{
  struct stat target, about;
  const bool standard = strcmp (input, "-") == 0;

  return stat (name, &target) == 0
         && (standard ? fstat (STDIN_FILENO, &about) : stat (input, &about)) == 0
         && S_ISREG (about.st_mode) && target.st_dev == about.st_dev
         && target.st_ino == about.st_ino;
}
