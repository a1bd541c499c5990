/* status.c - failing in one line */
#include <roadglint/status.h>
#include <roadglint/version.h>
#include <stdarg.h>
#include <stdio.h>

rg_status rg_fail(rg_error *err, rg_status status, const char *format, ...)
{
    if (err) {
        va_list args;
        va_start(args, format);
        vsnprintf(err->text, sizeof err->text, format, args);
        va_end(args);
    }
    return status;
}

const char *rg_version(void) { return ROADGLINT_VERSION; }
