/* pen.h - what all pictures of curves draw with: colours, dashes, text */
#ifndef RG_PLOT_PEN_H
#define RG_PLOT_PEN_H
#include "plot/plot.h"
#include <cairo.h>

/* Where text stands against its point. */
typedef enum { RG_LEFT, RG_MIDDLE, RG_RIGHT } rg_align;

enum { RG_PEN_MOST_BANDS = 2 * RG_PLOT_MOST_PX };

/* Lengths in pixels; em is the height of the text. */
typedef struct {
    cairo_t *cr;
    double width, height, em;
    double low_dbsm, high_dbsm;
    const rg_plot *plot;
    rg_band *band;              /* [RG_PEN_MOST_BANDS], to work in */
} rg_pen;

void rg_pen_grid(const rg_pen *pen);                                /* thin and pale, from here on */
void rg_pen_frame(const rg_pen *pen);
void rg_pen_curve(const rg_pen *pen, size_t curve);
void rg_pen_band(const rg_pen *pen, size_t curve);                  /* the same colour, to fill with what shows through */
void rg_pen_text(const rg_pen *pen, double x, double y, rg_align align, double most_width, const char *text);
double rg_pen_text_width(const rg_pen *pen, const char *text);
/* With a plain minus: where a machine has no fonts, cairo draws letters of its own, of ASCII only. */
void rg_pen_number(char text[32], double v);

/* Title and note from the top on, and how high they are. */
void rg_pen_heading(const rg_pen *pen);
double rg_pen_heading_height(const rg_plot *plot, double em);
/* The curves' labels in columns from y on, and how high they are. */
void rg_pen_legend(const rg_pen *pen, double y);
double rg_pen_legend_height(const rg_plot *plot, double em);

void rg_draw_polar(const rg_pen *pen);
void rg_draw_cartesian(const rg_pen *pen);

#endif
