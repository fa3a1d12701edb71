/* Marks for functions whose result or arguments the compiler should watch.  */
#ifndef SUPPORT_CHECK_H
#define SUPPORT_CHECK_H

#if defined __GNUC__
# define MUST_CHECK __attribute__ ((warn_unused_result))
# define PRINTF_LIKE(nth, first) __attribute__ ((format (printf, nth, first)))
#else
# define MUST_CHECK
# define PRINTF_LIKE(nth, first)
#endif

#endif
