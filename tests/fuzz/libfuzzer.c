/* The way in for clang's -fsanitize=fuzzer.  */
#include "config.h"
#include <stdint.h>
#include "fuzz/lines.h"

int LLVMFuzzerTestOneInput (const uint8_t *bytes, size_t n);

int
LLVMFuzzerTestOneInput (const uint8_t *bytes, size_t n)
{
  fuzz_lines ((const char *) bytes, n, false);
  return 0;
}
