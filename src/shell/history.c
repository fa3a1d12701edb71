#include "config.h"
#include "shell/history.h"

#include <stddef.h>
#include <string.h>

#include "shell/folders.h"
#include "support/text.h"

bool
history_file (struct text *path)
{
  return folder_file (path, FOLDER_STATE, "history") && folder_make_file (path->bytes);
}

/* Has it a line that opens like the time of an entry: '#' and a digit?  */
static bool
has_time_mark (const char *typed)
{
  for (const char *line = typed; line != NULL;) {
    if (line[0] == '#' && line[1] >= '0' && line[1] <= '9')
      return true;
    line = strchr (line, '\n');
    if (line != NULL)
      line++;
  }
  return false;
}

bool
history_keeps (const char *typed, const char *previous)
{
  if (*typed == '\0' || *typed == ' ' || *typed == '\t' || *typed == '\n')
    return false;
  return (previous == NULL || strcmp (typed, previous) != 0) && !has_time_mark (typed);
}
