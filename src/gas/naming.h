/* How names are compared (private to this layer).  */
#ifndef GAS_NAMING_H
#define GAS_NAMING_H

#include <stddef.h>

enum { NAMING_ROOM = 96 };     /* longest name that is looked at, with its end */

/* Writes the N bytes at NAME into OUT with subscript digits as digits, and ended by a null byte.
   Returns the length, 0 if it is empty or too long.                                            */
size_t naming_plain (const char *name, size_t n, char out[NAMING_ROOM]);

/* The same in small letters, and, for "squeezed", without blanks, hyphens and underscores: what
   two spellings of one name have in common.                                                    */
size_t naming_lower (const char *name, size_t n, char out[NAMING_ROOM]);
size_t naming_squeezed (const char *name, size_t n, char out[NAMING_ROOM]);

/* The length of the first of the names at LIST, parted by '|'; *NEXT: where the following one
   begins, null behind the last.                                                                */
size_t naming_first (const char *list, const char **next);

#endif
