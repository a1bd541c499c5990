/* polar.c - level over azimuth, seen from above: the front at the top, the left side at the left */
#include "plot/pen.h"
#include <math.h>
#include <stdio.h>

#define RAD_PER_DEG 0.017453292519943295769

typedef struct { double x, y, radius; } dial;

static double radius_of(const rg_pen *pen, const dial *d, double level_dbsm)
{
    const double share = (level_dbsm - pen->low_dbsm) / (pen->high_dbsm - pen->low_dbsm);
    return d->radius * fmin(fmax(share, 0.0), 1.0);
}

static void point(const dial *d, double az_deg, double radius, double *x, double *y)
{
    *x = d->x - radius * sin(az_deg * RAD_PER_DEG);
    *y = d->y - radius * cos(az_deg * RAD_PER_DEG);
}

static void draw_grid(const rg_pen *pen, const dial *d)
{
    const double step = rg_plot_step(pen->low_dbsm, pen->high_dbsm, 5);
    rg_pen_grid(pen);
    for (double level = ceil(pen->low_dbsm / step) * step; level <= pen->high_dbsm + 1e-9 * step; level += step) {
        cairo_new_sub_path(pen->cr);
        cairo_arc(pen->cr, d->x, d->y, radius_of(pen, d, level), 0.0, 360.0 * RAD_PER_DEG);
    }
    for (int az = 0; az < 360; az += 30) {
        double x, y;
        point(d, az, d->radius, &x, &y);
        cairo_move_to(pen->cr, d->x, d->y);
        cairo_line_to(pen->cr, x, y);
    }
    cairo_stroke(pen->cr);
    rg_pen_frame(pen);
    cairo_arc(pen->cr, d->x, d->y, d->radius, 0.0, 360.0 * RAD_PER_DEG);
    cairo_stroke(pen->cr);
}

static void draw_angles(const rg_pen *pen, const dial *d)
{
    static const char *const side[] = {"front 0\xc2\xb0", "left 90\xc2\xb0", "rear 180\xc2\xb0", "right 270\xc2\xb0"};
    for (int az = 0; az < 360; az += 30) {
        double x, y;
        char text[16];
        point(d, az, d->radius + 0.6 * pen->em, &x, &y);
        snprintf(text, sizeof text, "%d\xc2\xb0", az);
        const rg_align align = az == 0 || az == 180 ? RG_MIDDLE : az < 180 ? RG_RIGHT : RG_LEFT;
        y += az == 0 ? 0.0 : az == 180 ? 0.75 * pen->em : 0.35 * pen->em;
        rg_pen_text(pen, x, y, align, az % 90 == 0 ? side[az / 90] : text);
    }
}

/* Along the spoke of 345 degrees, on a pale ground so that curves do not run through the figures. */
static void draw_levels(const rg_pen *pen, const dial *d)
{
    const double step = rg_plot_step(pen->low_dbsm, pen->high_dbsm, 5);
    for (double level = ceil(pen->low_dbsm / step) * step; level <= pen->high_dbsm + 1e-9 * step; level += step) {
        char text[32];
        double x, y;
        cairo_text_extents_t extents;
        snprintf(text, sizeof text, level + step > pen->high_dbsm + 1e-9 * step ? "%g dBsm" : "%g", level == 0.0 ? 0.0 : level);
        point(d, 345.0, radius_of(pen, d, level), &x, &y);
        cairo_text_extents(pen->cr, text, &extents);
        cairo_set_source_rgba(pen->cr, 1.0, 1.0, 1.0, 0.8);
        cairo_rectangle(pen->cr, x - 0.5 * extents.x_advance - 0.15 * pen->em, y - 0.5 * pen->em, extents.x_advance + 0.3 * pen->em, 1.05 * pen->em);
        cairo_fill(pen->cr);
        rg_pen_text(pen, x, y + 0.35 * pen->em, RG_MIDDLE, text);
    }
}

static void draw_curve(const rg_pen *pen, const dial *d, size_t i)
{
    const rg_curve *c = &pen->plot->curve[i];
    rg_pen_curve(pen, i);
    for (size_t k = 0; k < c->n; k++) {
        double x, y;
        point(d, c->x[k], radius_of(pen, d, c->level_dbsm[k]), &x, &y);
        if (k == 0) cairo_move_to(pen->cr, x, y);
        else cairo_line_to(pen->cr, x, y);
    }
    /* a full circle closes where its gap is no wider than its steps are */
    if (c->n > 2 && 360.0 - (c->x[c->n - 1] - c->x[0]) <= 1.5 * (c->x[c->n - 1] - c->x[0]) / (double)(c->n - 1)) cairo_close_path(pen->cr);
    cairo_stroke(pen->cr);
}

void rg_draw_polar(const rg_pen *pen)
{
    const double top = pen->plot->title[0] ? 2.4 * pen->em : 0.6 * pen->em, legend = rg_pen_legend_height(pen->plot, pen->em);
    const double room = pen->height - top - legend;
    const dial d = {.x = 0.5 * pen->width, .y = top + 0.5 * room, .radius = fmin(0.5 * room - 2.0 * pen->em, 0.5 * pen->width - 5.5 * pen->em)};
    rg_pen_title(pen);
    draw_grid(pen, &d);
    draw_angles(pen, &d);
    for (size_t i = 0; i < pen->plot->n_curves; i++) draw_curve(pen, &d, i);
    draw_levels(pen, &d);
    rg_pen_legend(pen, pen->height - legend);
}
