/* cartesian.c - level over azimuth, elevation or frequency */
#include "plot/pen.h"
#include <math.h>
#include <stdio.h>

typedef struct { double x, y, width, height, low_x, high_x; } field;

static double x_of(const field *f, double x) { return f->x + f->width * (x - f->low_x) / (f->high_x - f->low_x); }
static double y_of(const rg_pen *pen, const field *f, double level_dbsm)
{
    return f->y + f->height * (pen->high_dbsm - level_dbsm) / (pen->high_dbsm - pen->low_dbsm);
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

static void draw_grid(const rg_pen *pen, const field *f)
{
    const double x_step = rg_plot_step(f->low_x, f->high_x, 8), y_step = rg_plot_step(pen->low_dbsm, pen->high_dbsm, 6);
    char text[32];
    for (double x = ceil(f->low_x / x_step - 1e-9) * x_step; x <= f->high_x + 1e-9 * x_step; x += x_step) {
        rg_pen_grid(pen);
        cairo_move_to(pen->cr, x_of(f, x), f->y);
        cairo_line_to(pen->cr, x_of(f, x), f->y + f->height);
        cairo_stroke(pen->cr);
        snprintf(text, sizeof text, "%.10g", fabs(x) < 1e-9 * x_step ? 0.0 : x);
        rg_pen_text(pen, x_of(f, x), f->y + f->height + 1.2 * pen->em, RG_MIDDLE, text);
    }
    for (double y = ceil(pen->low_dbsm / y_step - 1e-9) * y_step; y <= pen->high_dbsm + 1e-9 * y_step; y += y_step) {
        rg_pen_grid(pen);
        cairo_move_to(pen->cr, f->x, y_of(pen, f, y));
        cairo_line_to(pen->cr, f->x + f->width, y_of(pen, f, y));
        cairo_stroke(pen->cr);
        snprintf(text, sizeof text, "%.10g", fabs(y) < 1e-9 * y_step ? 0.0 : y);
        rg_pen_text(pen, f->x - 0.5 * pen->em, y_of(pen, f, y) + 0.35 * pen->em, RG_RIGHT, text);
    }
    rg_pen_frame(pen);
    cairo_rectangle(pen->cr, f->x, f->y, f->width, f->height);
    cairo_stroke(pen->cr);
}

static void draw_names(const rg_pen *pen, const field *f)
{
    rg_pen_text(pen, f->x + 0.5 * f->width, f->y + f->height + 2.5 * pen->em, RG_MIDDLE, pen->plot->x_name);
    cairo_save(pen->cr);
    cairo_translate(pen->cr, 1.3 * pen->em, f->y + 0.5 * f->height);
    cairo_rotate(pen->cr, -1.5707963267948966);
    rg_pen_text(pen, 0.0, 0.0, RG_MIDDLE, "radar cross section (dBsm)");
    cairo_restore(pen->cr);
}

static void draw_curve(const rg_pen *pen, const field *f, size_t i)
{
    const rg_curve *c = &pen->plot->curve[i];
    const double far_off = 10.0 * (pen->high_dbsm - pen->low_dbsm);
    cairo_save(pen->cr);
    cairo_rectangle(pen->cr, f->x, f->y, f->width, f->height);
    cairo_clip(pen->cr);
    rg_pen_curve(pen, i);
    for (size_t k = 0; k < c->n; k++) {
        const double level = fmax(c->level_dbsm[k], pen->low_dbsm - far_off);
        if (k == 0) cairo_move_to(pen->cr, x_of(f, c->x[k]), y_of(pen, f, level));
        cairo_line_to(pen->cr, x_of(f, c->x[k]), y_of(pen, f, level));
    }
    cairo_set_line_cap(pen->cr, c->n == 1 ? CAIRO_LINE_CAP_ROUND : CAIRO_LINE_CAP_BUTT);    /* a single sample is a dot */
    if (c->n == 1) cairo_set_line_width(pen->cr, 0.5 * pen->em);
    cairo_stroke(pen->cr);
    cairo_restore(pen->cr);
}

void rg_draw_cartesian(const rg_pen *pen)
{
    const double top = pen->plot->title[0] ? 2.6 * pen->em : 1.0 * pen->em, legend = rg_pen_legend_height(pen->plot, pen->em);
    field f = {.x = 5.0 * pen->em, .y = top, .width = pen->width - 6.5 * pen->em, .height = pen->height - top - legend - 3.3 * pen->em};
    find_x_limits(pen->plot, &f.low_x, &f.high_x);
    rg_pen_title(pen);
    draw_grid(pen, &f);
    draw_names(pen, &f);
    for (size_t i = 0; i < pen->plot->n_curves; i++) draw_curve(pen, &f, i);
    rg_pen_legend(pen, pen->height - legend);
}
