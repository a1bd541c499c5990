/* progress.c - how far, how fast, how long still */
#include "base/progress.h"
#include <time.h>
#include <unistd.h>

#define SHOW_EVERY_S 0.1

static double now_s(void)
{
    struct timespec t;
    clock_gettime(CLOCK_MONOTONIC, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

rg_progress rg_progress_start(FILE *stream, bool quiet, const char *what, size_t n)
{
    const bool shows = stream && !quiet && isatty(fileno(stream));
    return (rg_progress){.stream = shows ? stream : NULL, .what = what, .n = n, .start_s = now_s()};
}

static void print_left(FILE *stream, double left_s)
{
    if (left_s < 90.0) fprintf(stream, "%.0f s left", left_s);
    else if (left_s < 5400.0) fprintf(stream, "%.0f min left", left_s / 60.0);
    else fprintf(stream, "%.1f h left", left_s / 3600.0);
}

void rg_progress_show(rg_progress *progress, size_t done)
{
    if (!progress->stream || done == 0) return;
    const double now = now_s(), spent_s = now - progress->start_s;
    if (now - progress->shown_s < SHOW_EVERY_S || spent_s <= 0.0) return;
    const double rate = (double)done / spent_s;
    progress->shown_s = now;
    progress->drawn = true;
    fprintf(progress->stream, "\r\033[K%zu of %zu %s, %.3g a second, ", done, progress->n, progress->what, rate);
    print_left(progress->stream, (double)(progress->n - done) / rate);
    fflush(progress->stream);
}

void rg_progress_hide(rg_progress *progress)
{
    if (!progress->drawn) return;
    progress->drawn = false;
    fputs("\r\033[K", progress->stream);
    fflush(progress->stream);
}

void rg_progress_end(rg_progress *progress)
{
    rg_progress_hide(progress);
    progress->stream = NULL;
}
