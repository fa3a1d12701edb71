#include "config.h"
#include "support/infile.h"

#include <errno.h>
#include <stdio.h>
#include <string.h>
#include "support/text.h"

bool
infile_read (const struct infile *in, struct text *text)
{
  char block[1 << 16];
  const size_t start = text->length;
  const bool standard = in->standard && strcmp (in->name, "-") == 0;
  FILE *file = standard ? stdin : fopen (in->name, "r");

  if (file == NULL)
    return false;
  for (size_t n; text->length - start <= in->most && (in->stop == NULL || !in->stop ())
                 && (n = fread (block, 1, sizeof block, file)) > 0;)
    text_add_bytes (text, block, n);
  const bool fits = text->length - start <= in->most;
  const bool good = fits && !ferror (file);
  const int reason = fits ? errno : EFBIG;
  if (!standard)
    (void) fclose (file);
  errno = reason;
  return good;
}
