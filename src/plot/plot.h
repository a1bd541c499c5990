/* plot.h - curves of levels as pictures */
#ifndef RG_PLOT_PLOT_H
#define RG_PLOT_PLOT_H
#include <roadglint/status.h>
#include <stddef.h>

enum { RG_PLOT_LEAST_PX = 300, RG_PLOT_MOST_PX = 8000, RG_PLOT_MOST_CURVES = 8 };

typedef enum { RG_PLOT_POLAR, RG_PLOT_CARTESIAN } rg_plot_kind;

typedef struct {
    const char *label;
    size_t n;
    const double *x, *level_dbsm;       /* x rising; degrees of azimuth in a polar picture */
} rg_curve;

typedef struct {
    rg_plot_kind kind;
    const char *title;                  /* may be empty */
    const char *x_name;                 /* "azimuth (deg)"; of no use to a polar picture */
    size_t n_curves;                    /* 1 .. RG_PLOT_MOST_CURVES */
    const rg_curve *curve;
    double low_dbsm, high_dbsm;         /* NAN: found from the curves */
    int width_px;                       /* RG_PLOT_LEAST_PX .. RG_PLOT_MOST_PX; points in SVG and PDF */
} rg_plot;

/* Lowest and highest level to show: the highest is the next multiple of 5 dB above all; the lowest leaves the bottom twentieth of the
 * samples out, but shows 30 dB at least and 60 dB at most. */
void rg_plot_limits(size_t n_curves, const rg_curve curve[], double *low_dbsm, double *high_dbsm);

/* Steps of 1, 2 or 5 times a power of ten, so that about n of them fit from low to high; 10 dB stands for 20 in levels. */
double rg_plot_step(double low, double high, int n);

/* Writes the picture that the ending of path asks for: .svg, .png or .pdf. It appears under its name only when it is complete.
 * RG_BAD_VALUE (another ending, no curve, limits the wrong way round), RG_NO_MEMORY, RG_SYSTEM. */
rg_status rg_plot_write(const rg_plot *plot, const char *path, rg_error *err);

#endif
