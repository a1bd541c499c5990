/* roadglint/version.h - which library this is */
#ifndef ROADGLINT_VERSION_H
#define ROADGLINT_VERSION_H
#include <roadglint/status.h>

/** "MAJOR.MINOR.PATCH" of the library that is linked. */
RG_API const char *rg_version(void);

#endif
