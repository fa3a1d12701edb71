#include "config.h"
#include "shell/folders.h"

#include <errno.h>
#include <fcntl.h>
#include <stddef.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "support/text.h"

enum { FOLDER_MODE = 0700, FILE_MODE = 0600 };

bool
folder_file (struct text *path, enum folder folder, const char *name)
{
  static const struct { const char *variable, *below_home; } rows[] = {
    [FOLDER_CONFIG] = { "XDG_CONFIG_HOME", "/.config" },
    [FOLDER_STATE] = { "XDG_STATE_HOME", "/.local/state" }
  };
  const char *base = getenv (rows[folder].variable), *home = getenv ("HOME");

  text_empty (path);
  if (base != NULL && *base == '/') {
    text_add (path, base);
  } else if (home != NULL && *home == '/') {
    text_add (path, home);
    text_add (path, rows[folder].below_home);
  } else {
    return false;
  }
  text_add (path, "/gaswright/");
  text_add (path, name);
  return true;
}

/* Makes every folder of PATH that is not there.  */
static bool
make_folders (const char *path)
{
  struct text part;
  bool made = true;

  text_init (&part);
  for (const char *slash = strchr (path + 1, '/'); slash != NULL && made;
       slash = strchr (slash + 1, '/')) {
    text_empty (&part);
    text_add_bytes (&part, path, (size_t) (slash - path));
    made = mkdir (part.bytes, FOLDER_MODE) == 0 || errno == EEXIST;
  }
  text_clear (&part);
  return made;
}

bool
folder_make_file (const char *path)
{
  int fd;

  if (!make_folders (path))
    return false;
  fd = open (path, O_RDWR | O_CREAT | O_CLOEXEC, FILE_MODE);
  if (fd == -1)
    return false;
  close (fd);
  return true;
}
