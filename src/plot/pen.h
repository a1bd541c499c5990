/* pen.h - what all pictures draw with: colours, dashes, text */
#ifndef RG_PLOT_PEN_H
#define RG_PLOT_PEN_H
#include "plot/plot.h"
#include <cairo.h>

/* Where text stands against its point. */
typedef enum { RG_LEFT, RG_MIDDLE, RG_RIGHT } rg_align;

/* Lengths in pixels; em is the height of the text. */
typedef struct { cairo_t *cr; double width, height, em; double low_dbsm, high_dbsm; const rg_plot *plot; } rg_pen;

void rg_pen_grid(const rg_pen *pen);                                /* thin and pale, from here on */
void rg_pen_frame(const rg_pen *pen);
void rg_pen_curve(const rg_pen *pen, size_t curve);
void rg_pen_text(const rg_pen *pen, double x, double y, rg_align align, const char *text);
void rg_pen_title(const rg_pen *pen);
/* The curves' labels in columns from y on, and how high they will be. */
void rg_pen_legend(const rg_pen *pen, double y);
double rg_pen_legend_height(const rg_plot *plot, double em);

void rg_draw_polar(const rg_pen *pen);
void rg_draw_cartesian(const rg_pen *pen);

#endif
