/* The property somebody may have meant by a name it does not have here.  */
#ifndef LANGUAGE_PROPERTY_NAMES_H
#define LANGUAGE_PROPERTY_NAMES_H

/* The name here of what TEXT is elsewhere, or that is spelt nearly so, capitals apart; null.  */
const char *property_meant (const char *text);

#endif
