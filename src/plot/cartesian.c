/* cartesian.c - level over azimuth, elevation or frequency */
#include "plot/pen.h"
#include <math.h>
#include <stdio.h>

typedef struct { double x, y, width, height, low_x, high_x; } field;

static double x_of(const field *f, double x) { return f->x + f->width * (x - f->low_x) / (f->high_x - f->low_x); }
/* Not farther off than ten times the field: cairo's coordinates end somewhere. */
static double y_of(const rg_pen *pen, const field *f, double level_dbsm)
{
    return f->y + f->height * fmin(fmax((pen->high_dbsm - level_dbsm) / (pen->high_dbsm - pen->low_dbsm), -10.0), 10.0);
}

static void find_x_limits(const rg_plot *plot, double *low, double *high)
{
    *low = INFINITY;
    *high = -INFINITY;
    for (size_t i = 0; i < plot->n_curves; i++)
        if (plot->curve[i].n > 0) {
            *low = fmin(*low, plot->curve[i].x[0]);
            *high = fmax(*high, plot->curve[i].x[plot->curve[i].n - 1]);
        }
    if (*low == *high) {                                    /* a single sample stands in the middle */
        *low -= 1.0;
        *high += 1.0;
    }
}

/* Marks on the x axis: fewer where their labels are long. */
static size_t find_x_ticks(const rg_pen *pen, const field *f, double tick[RG_PLOT_MOST_TICKS])
{
    size_t n = 0;
    for (int wanted = 12; wanted > 1; wanted--) {
        double widest = 0.0;
        char text[32];
        n = rg_plot_ticks(f->low_x, f->high_x, wanted, pen->plot->x_is_angle, tick);
        for (size_t i = 0; i < n; i++) {
            rg_pen_number(text, tick[i]);
            widest = fmax(widest, rg_pen_text_width(pen, text));
        }
        if ((widest + 1.5 * pen->em) * (double)n <= f->width) break;
    }
    return n;
}

static void draw_grid(const rg_pen *pen, const field *f)
{
    double tick[RG_PLOT_MOST_TICKS];
    char text[32];
    rg_pen_grid(pen);
    size_t n = find_x_ticks(pen, f, tick);
    for (size_t i = 0; i < n; i++) {
        rg_pen_number(text, tick[i]);
        rg_pen_text(pen, x_of(f, tick[i]), f->y + f->height + 1.2 * pen->em, RG_MIDDLE, f->width, text);
        rg_pen_grid(pen);
        cairo_move_to(pen->cr, x_of(f, tick[i]), f->y);
        cairo_line_to(pen->cr, x_of(f, tick[i]), f->y + f->height);
        cairo_stroke(pen->cr);
    }
    n = rg_plot_ticks(pen->low_dbsm, pen->high_dbsm, 6, false, tick);
    for (size_t i = 0; i < n; i++) {
        const double y = y_of(pen, f, tick[i]);
        rg_pen_number(text, tick[i]);
        rg_pen_text(pen, f->x - 0.5 * pen->em, y + 0.35 * pen->em, RG_RIGHT, f->x - 2.3 * pen->em, text);
        rg_pen_grid(pen);
        cairo_move_to(pen->cr, f->x, y);
        cairo_line_to(pen->cr, f->x + f->width, y);
        cairo_stroke(pen->cr);
    }
}

static void draw_names(const rg_pen *pen, const field *f)
{
    rg_pen_text(pen, f->x + 0.5 * f->width, f->y + f->height + 2.5 * pen->em, RG_MIDDLE, f->width, pen->plot->x_name);
    cairo_save(pen->cr);
    cairo_translate(pen->cr, 1.3 * pen->em, f->y + 0.5 * f->height);
    cairo_rotate(pen->cr, -1.5707963267948966);
    rg_pen_text(pen, 0.0, 0.0, RG_MIDDLE, f->height, "radar cross section (dBsm)");
    cairo_restore(pen->cr);
}

static void draw_bands(const rg_pen *pen, const field *f, size_t n, size_t i)
{
    const rg_band *band = pen->band;
    for (size_t k = 0; k < n; k++) cairo_line_to(pen->cr, x_of(f, band[k].x), y_of(pen, f, band[k].high));
    for (size_t k = n; k-- > 0; ) cairo_line_to(pen->cr, x_of(f, band[k].x), y_of(pen, f, band[k].low));
    cairo_close_path(pen->cr);
    rg_pen_band(pen, i);
    cairo_fill(pen->cr);
    for (size_t k = 0; k < n; k++) cairo_line_to(pen->cr, x_of(f, band[k].x), y_of(pen, f, band[k].high));
}

/* Says whether it had to be drawn as bands. */
static bool draw_curve(const rg_pen *pen, const field *f, size_t i)
{
    const rg_curve *c = &pen->plot->curve[i];
    if (c->n == 0) return false;
    const size_t n_bands = rg_plot_bands(c, 0.06 * pen->em * (f->high_x - f->low_x) / f->width, RG_PEN_MOST_BANDS, pen->band);
    if (n_bands > 0) draw_bands(pen, f, n_bands, i);
    else for (size_t k = 0; k < c->n; k++) cairo_line_to(pen->cr, x_of(f, c->x[k]), y_of(pen, f, c->level_dbsm[k]));
    rg_pen_curve(pen, i);
    if (n_bands > 0) cairo_set_line_width(pen->cr, 0.055 * pen->em);
    if (c->n == 1) {                                        /* a single sample is a dot */
        cairo_line_to(pen->cr, x_of(f, c->x[0]), y_of(pen, f, c->level_dbsm[0]));
        cairo_set_line_cap(pen->cr, CAIRO_LINE_CAP_ROUND);
        cairo_set_line_width(pen->cr, 0.5 * pen->em);
    }
    cairo_stroke(pen->cr);
    return n_bands > 0;
}

void rg_draw_cartesian(const rg_pen *pen)
{
    const double em = pen->em, top = rg_pen_heading_height(pen->plot, em), legend = rg_pen_legend_height(pen->plot, em);
    field f = {.x = 5.0 * em, .y = top, .width = pen->width - 6.5 * em, .height = pen->height - top - legend - 3.3 * em};
    bool shaded = false;
    find_x_limits(pen->plot, &f.low_x, &f.high_x);
    rg_pen_heading(pen);
    draw_grid(pen, &f);
    draw_names(pen, &f);
    cairo_save(pen->cr);
    cairo_rectangle(pen->cr, f.x, f.y, f.width, f.height);
    cairo_clip(pen->cr);
    for (size_t i = 0; i < pen->plot->n_curves; i++) shaded |= draw_curve(pen, &f, i);
    cairo_restore(pen->cr);
    rg_pen_frame(pen);
    cairo_rectangle(pen->cr, f.x, f.y, f.width, f.height);
    cairo_stroke(pen->cr);
    if (shaded) rg_pen_text(pen, f.x + f.width, f.y + f.height + 2.5 * em, RG_RIGHT, 0.4 * f.width, "shaded: lowest to highest");
    rg_pen_legend(pen, pen->height - legend);
}
