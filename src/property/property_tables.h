/* The tables that few questions need, each read when it is first asked.

   A session owns one of these and hands it to the functions that need it.  Making it reads
   nothing; what was read stays until it is destroyed.                                           */
#ifndef PROPERTY_PROPERTY_TABLES_H
#define PROPERTY_PROPERTY_TABLES_H

#include <stddef.h>
#include "support/check.h"

struct fault; struct figures; struct property_tables;

/* DIRECTORY: of the user's own tables, null if there are none; copied.  Owned.  */
struct property_tables *property_tables_create (const char *directory) MUST_CHECK;
void property_tables_destroy (struct property_tables *);             /* null is allowed */

enum property_table { PROPERTY_TABLE_CP_IDEAL, PROPERTY_TABLE_VISCOSITY, PROPERTY_TABLE_VIRIAL,
                      PROPERTY_TABLE_FUELS, PROPERTY_TABLES };

/* The table with these N columns (the same at every call), read now if it was not yet.  For the
   modules of this layer.  Borrowed.  Null with FAULT if a user's file of that name cannot be
   read.                                                                                         */
const struct figures *property_tables_read (struct property_tables *, enum property_table,
                                            size_t n, const char *const column[],
                                            struct fault *) MUST_CHECK;

#endif
