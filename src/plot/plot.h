/* plot.h - curves of levels as pictures */
#ifndef RG_PLOT_PLOT_H
#define RG_PLOT_PLOT_H
#include <roadglint/status.h>
#include <stdbool.h>
#include <stddef.h>

enum { RG_PLOT_LEAST_PX = 300, RG_PLOT_MOST_PX = 8000, RG_PLOT_MOST_CURVES = 8, RG_PLOT_MOST_TICKS = 32 };

typedef enum { RG_PLOT_POLAR, RG_PLOT_CARTESIAN } rg_plot_kind;

typedef struct {
    const char *label;
    size_t n;
    const double *x, *level_dbsm;       /* finite; x rising; degrees of azimuth in a polar picture */
} rg_curve;

/* Texts are UTF-8; what is not shows as '?'. What is too long for its place is shortened in its middle. */
typedef struct {
    rg_plot_kind kind;
    const char *title, *note;           /* in bold, and below it: what holds for all curves; may be empty */
    const char *x_name;                 /* "azimuth (deg)"; of no use to a polar picture */
    bool x_is_angle;                    /* degrees: marks at 15, 30, 45, 90 */
    size_t n_curves;                    /* 1 .. RG_PLOT_MOST_CURVES */
    const rg_curve *curve;
    double low_dbsm, high_dbsm;         /* NAN: found from the curves */
    int width_px;                       /* RG_PLOT_LEAST_PX .. RG_PLOT_MOST_PX; a pixel of SVG and PDF is 1/96 inch */
} rg_plot;

/* Lowest and highest level to show: the highest is the next multiple of 5 dB above all; the lowest leaves the bottom twentieth of the
 * samples out, but shows 40 dB at least and 60 dB at most. */
void rg_plot_limits(size_t n_curves, const rg_curve curve[], double *low_dbsm, double *high_dbsm);

/* Round numbers from low to high, rising, about n of them and never more than n + 1 (n under RG_PLOT_MOST_TICKS): multiples of 1, 2 or 5
 * times a power of ten; angle: of 15, 30, 45, 90 and on where that is the size of it. Returns how many. */
size_t rg_plot_ticks(double low, double high, int n, bool angle, double tick[RG_PLOT_MOST_TICKS]);

/* What a curve covers within one step of the picture. */
typedef struct { double x, low, high; } rg_band;

/* A curve of many samples as bands, one for each step of x that has samples; a band reaches to the next one's first sample, so that the
 * line between them is covered. Returns how many, at most most; 0 where the curve is better drawn as it is: it turns up or down no more than
 * once a step, and has no more than 16 samples a step. */
size_t rg_plot_bands(const rg_curve *curve, double step, size_t most, rg_band band[]);

/* RG_BAD_VALUE: the ending of path is none of .svg, .png and .pdf. */
rg_status rg_plot_check_path(const char *path, rg_error *err);

/* Writes the picture that the ending of path asks for. It appears under its name only when it is complete, and has the same bytes whenever
 * it is drawn. RG_BAD_VALUE (another ending, no curve, limits the wrong way round), RG_NO_MEMORY, RG_SYSTEM. */
rg_status rg_plot_write(const rg_plot *plot, const char *path, rg_error *err);

#endif
