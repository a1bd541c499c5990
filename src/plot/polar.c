/* polar.c - level over azimuth, seen from above: the front at the top, the left side at the left */
#include "plot/pen.h"
#include <math.h>
#include <stdio.h>

#define RAD_PER_DEG 0.017453292519943295769

typedef struct { double x, y, radius; } dial;

/* The least level is in the middle, and so is all below it; the greatest is the rim, and what is above is beyond it. */
static double radius_of(const rg_pen *pen, const dial *d, double level_dbsm)
{
    return d->radius * fmin(fmax((level_dbsm - pen->low_dbsm) / (pen->high_dbsm - pen->low_dbsm), 0.0), 100.0);
}

static void point(const dial *d, double az_deg, double radius, double *x, double *y)
{
    *x = d->x - radius * sin(az_deg * RAD_PER_DEG);
    *y = d->y - radius * cos(az_deg * RAD_PER_DEG);
}

static void draw_grid(const rg_pen *pen, const dial *d, size_t n_rings, const double ring_dbsm[])
{
    rg_pen_grid(pen);
    for (size_t i = 0; i < n_rings; i++) {
        cairo_new_sub_path(pen->cr);
        cairo_arc(pen->cr, d->x, d->y, radius_of(pen, d, ring_dbsm[i]), 0.0, 360.0 * RAD_PER_DEG);
    }
    for (int az = 0; az < 360; az += 30) {
        double x, y;
        point(d, az, d->radius, &x, &y);
        cairo_move_to(pen->cr, d->x, d->y);
        cairo_line_to(pen->cr, x, y);
    }
    cairo_stroke(pen->cr);
}

/* The sides that left and right are seen from above, as on the vehicle itself. */
static void draw_angles(const rg_pen *pen, const dial *d)
{
    static const char *const side[] = {"front 0\xc2\xb0", "left", "rear 180\xc2\xb0", "right"};
    const double em = pen->em;
    for (int az = 0; az < 360; az += 30) {
        double x, y;
        char text[16];
        point(d, az, d->radius + 0.6 * em, &x, &y);
        snprintf(text, sizeof text, "%d\xc2\xb0", az);
        const rg_align align = az == 0 || az == 180 ? RG_MIDDLE : az < 180 ? RG_RIGHT : RG_LEFT;
        y += az == 0 ? 0.0 : az == 180 ? 0.75 * em : 0.35 * em;
        if (az == 90 || az == 270) {
            rg_pen_text(pen, x, y - 0.6 * em, align, pen->width, side[az / 90]);
            rg_pen_text(pen, x, y + 0.6 * em, align, pen->width, text);
        } else {
            rg_pen_text(pen, x, y, align, pen->width, az % 90 == 0 ? side[az / 90] : text);
        }
    }
}

/* Along the direction of 345 degrees, on a pale ground so that curves do not run through the figures. */
static void draw_levels(const rg_pen *pen, const dial *d, size_t n_rings, const double ring_dbsm[])
{
    for (size_t i = 0; i < n_rings; i++) {
        char level[32], text[40];
        double x, y;
        rg_pen_number(level, ring_dbsm[i]);
        snprintf(text, sizeof text, "%s%s", level, i + 1 == n_rings ? " dBsm" : "");
        point(d, 345.0, radius_of(pen, d, ring_dbsm[i]), &x, &y);
        const double width = rg_pen_text_width(pen, text);
        cairo_set_source_rgba(pen->cr, 1.0, 1.0, 1.0, 0.8);
        cairo_rectangle(pen->cr, x - 0.5 * width - 0.15 * pen->em, y - 0.5 * pen->em, width + 0.3 * pen->em, 1.05 * pen->em);
        cairo_fill(pen->cr);
        rg_pen_text(pen, x, y + 0.35 * pen->em, RG_MIDDLE, pen->width, text);
    }
}

static void line_to(const rg_pen *pen, const dial *d, double az_deg, double level_dbsm)
{
    double x, y;
    point(d, az_deg, radius_of(pen, d, level_dbsm), &x, &y);
    cairo_line_to(pen->cr, x, y);
}

/* A circle closes where its gap is no wider than its steps are. */
static bool closes(const rg_curve *c)
{
    const double span = c->x[c->n - 1] - c->x[0];
    return c->n > 2 && 360.0 - span <= 1.5 * span / (double)(c->n - 1);
}

static void draw_bands(const rg_pen *pen, const dial *d, size_t n, bool closed, size_t i)
{
    for (size_t k = 0; k < n; k++) line_to(pen, d, pen->band[k].x, pen->band[k].high);
    if (closed) {
        cairo_close_path(pen->cr);
        cairo_new_sub_path(pen->cr);
    }
    for (size_t k = n; k-- > 0; ) line_to(pen, d, pen->band[k].x, pen->band[k].low);
    cairo_close_path(pen->cr);
    rg_pen_band(pen, i);
    cairo_set_fill_rule(pen->cr, CAIRO_FILL_RULE_EVEN_ODD);
    cairo_fill(pen->cr);
    for (size_t k = 0; k < n; k++) line_to(pen, d, pen->band[k].x, pen->band[k].high);
}

/* Says whether it had to be drawn as bands. */
static bool draw_curve(const rg_pen *pen, const dial *d, size_t i)
{
    const rg_curve *c = &pen->plot->curve[i];
    if (c->n == 0) return false;
    const size_t n_bands = rg_plot_bands(c, 0.16 * pen->em / d->radius / RAD_PER_DEG, RG_PEN_MOST_BANDS, pen->band);
    if (n_bands > 0) draw_bands(pen, d, n_bands, closes(c), i);
    else for (size_t k = 0; k < c->n; k++) line_to(pen, d, c->x[k], c->level_dbsm[k]);
    if (closes(c)) cairo_close_path(pen->cr);
    rg_pen_curve(pen, i);
    if (n_bands > 0) cairo_set_line_width(pen->cr, 0.055 * pen->em);
    if (c->n == 1) {                                        /* a single sample is a dot */
        line_to(pen, d, c->x[0], c->level_dbsm[0]);
        cairo_set_line_cap(pen->cr, CAIRO_LINE_CAP_ROUND);
        cairo_set_line_width(pen->cr, 0.5 * pen->em);
    }
    cairo_stroke(pen->cr);
    return n_bands > 0;
}

void rg_draw_polar(const rg_pen *pen)
{
    double ring_dbsm[RG_PLOT_MOST_TICKS];
    const double top = rg_pen_heading_height(pen->plot, pen->em), legend = rg_pen_legend_height(pen->plot, pen->em);
    const double room = pen->height - top - legend;
    const dial d = {.x = 0.5 * pen->width, .y = top + 0.5 * room - 0.2 * pen->em, .radius = fmin(0.5 * room - 2.0 * pen->em, 0.5 * pen->width - 4.0 * pen->em)};
    const size_t n_rings = rg_plot_ticks(pen->low_dbsm, pen->high_dbsm, 6, false, ring_dbsm);
    bool shaded = false;
    rg_pen_heading(pen);
    draw_grid(pen, &d, n_rings, ring_dbsm);
    draw_angles(pen, &d);
    cairo_save(pen->cr);
    cairo_arc(pen->cr, d.x, d.y, d.radius, 0.0, 360.0 * RAD_PER_DEG);
    cairo_clip(pen->cr);
    for (size_t i = 0; i < pen->plot->n_curves; i++) shaded |= draw_curve(pen, &d, i);
    cairo_restore(pen->cr);
    rg_pen_frame(pen);
    cairo_arc(pen->cr, d.x, d.y, d.radius, 0.0, 360.0 * RAD_PER_DEG);
    cairo_stroke(pen->cr);
    draw_levels(pen, &d, n_rings, ring_dbsm);
    for (int i = 0; i < 3 && shaded; i++) {
        static const char *const line[] = {"shaded: from", "lowest to", "highest level"};
        rg_pen_text(pen, 1.0 * pen->em, top + room - (3.4 - 1.2 * i) * pen->em, RG_LEFT, pen->width, line[i]);
    }
    rg_pen_legend(pen, pen->height - legend);
}
