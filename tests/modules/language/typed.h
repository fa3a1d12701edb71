/* Statements run in a session of their own, for the tests.  */
#ifndef MODULES_LANGUAGE_TYPED_H
#define MODULES_LANGUAGE_TYPED_H

struct arena; struct result; struct session;

/* Calls EACH with a session as shipped.  */
void with_session (void (*each) (struct arena *, struct session *));

/* What the last of TEXT's statements came to; null, and the test has failed: one went wrong.  */
const struct result *typed (struct arena *, struct session *, const char *text);

#endif
