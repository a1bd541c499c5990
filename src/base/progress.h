/* progress.h - how far, how fast, how long still: one line on a terminal */
#ifndef RG_BASE_PROGRESS_H
#define RG_BASE_PROGRESS_H
#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>

typedef struct {
    FILE *stream;           /* NULL: silent */
    const char *what;       /* such as "aspects" */
    size_t n;
    double start_s, shown_s;
    bool drawn;             /* the line stands on the terminal */
} rg_progress;

/* Shows on stream when it is a terminal and quiet is false. */
rg_progress rg_progress_start(FILE *stream, bool quiet, const char *what, size_t n);
/* Redraws at most ten times a second. */
void rg_progress_show(rg_progress *progress, size_t done);
/* Wipes the line, so that other text may follow; it comes back with the next show. */
void rg_progress_hide(rg_progress *progress);
/* Wipes the line for good. */
void rg_progress_end(rg_progress *progress);

#endif
