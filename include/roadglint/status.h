/* roadglint/status.h - how a call ends, and what to tell the user when it fails */
#ifndef ROADGLINT_STATUS_H
#define ROADGLINT_STATUS_H

#if defined(__GNUC__)
#define RG_API __attribute__((visibility("default")))
#define RG_PRINTF(text, first) __attribute__((format(printf, text, first)))
#else
#define RG_API
#define RG_PRINTF(text, first)
#endif

typedef enum {
    RG_OK,
    RG_BAD_VALUE,   /* an argument is outside of what the call takes */
    RG_BAD_INPUT,   /* a file or an array from outside cannot be used */
    RG_NO_MEMORY,
    RG_SYSTEM,      /* disk, pipe, process: the operating system said no */
    RG_STOPPED      /* the caller asked to stop, and it has */
} rg_status;

/** What went wrong, one line without its newline, in the user's words. It lives with the caller: there is no "last error". */
typedef struct { char text[512]; } rg_error;

/** Fills err (if there is one) and returns status, so that to fail is one line. Text that does not fit is cut. */
RG_API rg_status rg_fail(rg_error *err, rg_status status, const char *format, ...) RG_PRINTF(3, 4);

#endif
