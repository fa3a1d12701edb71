/* What --version prints.  */
#ifndef SHELL_VERSION_H
#define SHELL_VERSION_H

struct text;

/* Name, version, copyright, licence, and the edition of the built-in data tables.  */
void version_write (struct text *);

#endif
