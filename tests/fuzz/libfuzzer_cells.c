/* The way in for clang's -fsanitize=fuzzer: files of analyses.  */
#include "config.h"
#include <stdint.h>
#include "fuzz/cells.h"

int LLVMFuzzerTestOneInput (const uint8_t *bytes, size_t n);

int
LLVMFuzzerTestOneInput (const uint8_t *bytes, size_t n)
{
  static struct cells *cells;             /* the tables are read once */
  if (cells == NULL)
    cells = cells_create ();
  (void) fuzz_cells (cells, (const char *) bytes, n);
  return 0;
}
