/* A statement as one s-expression, in the form of the column `reading` of the samples.  */
#ifndef TREE_PRINT_H
#define TREE_PRINT_H

struct statement; struct text;

void tree_print (struct text *, const struct statement *);

#endif
