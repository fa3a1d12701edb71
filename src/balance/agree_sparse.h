/* Do the facts of a core agree, where too many are to spare for their left null vectors?  */
#ifndef BALANCE_AGREE_SPARSE_H
#define BALANCE_AGREE_SPARSE_H

struct core;

/* As core_agree, which has set sigma and figure.  Rows out by less than TOLERANCE hold; facts less
   likely than LEAST_P clash.  Every figure must have one row.                                   */
void agree_sparsely (struct core *, double tolerance, double least_p);

#endif
