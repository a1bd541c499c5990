/* pen.c - colours, dashes, text */
#include "plot/pen.h"
#include <math.h>

/* Distinct for all common kinds of colour vision (M. Okabe, K. Ito, 2008); the dashes keep them apart in grey. */
static const struct { double r, g, b; } colour[RG_PLOT_MOST_CURVES] = {
    {0.000, 0.447, 0.698}, {0.835, 0.369, 0.000}, {0.000, 0.620, 0.451}, {0.800, 0.475, 0.655},
    {0.000, 0.000, 0.000}, {0.902, 0.624, 0.000}, {0.337, 0.706, 0.914}, {0.450, 0.450, 0.450}};
static const struct { int n; double of_em[4]; } dash[RG_PLOT_MOST_CURVES] = {
    {0, {0}}, {2, {0.45, 0.25}}, {2, {0.12, 0.2}}, {4, {0.6, 0.2, 0.12, 0.2}}, {2, {0.9, 0.25}}, {0, {0}}, {2, {0.3, 0.3}}, {4, {0.9, 0.2, 0.3, 0.2}}};

enum { LEGEND_COLUMNS = 2 };

void rg_pen_grid(const rg_pen *pen)
{
    cairo_set_source_rgb(pen->cr, 0.80, 0.81, 0.83);
    cairo_set_line_width(pen->cr, pen->em * 0.05);
    cairo_set_dash(pen->cr, NULL, 0, 0.0);
}

void rg_pen_frame(const rg_pen *pen)
{
    cairo_set_source_rgb(pen->cr, 0.35, 0.36, 0.38);
    cairo_set_line_width(pen->cr, pen->em * 0.07);
    cairo_set_dash(pen->cr, NULL, 0, 0.0);
}

void rg_pen_curve(const rg_pen *pen, size_t curve)
{
    double lengths[4];
    for (int i = 0; i < dash[curve].n; i++) lengths[i] = dash[curve].of_em[i] * pen->em;
    cairo_set_source_rgb(pen->cr, colour[curve].r, colour[curve].g, colour[curve].b);
    cairo_set_line_width(pen->cr, pen->em * 0.085);
    cairo_set_line_join(pen->cr, CAIRO_LINE_JOIN_ROUND);
    cairo_set_dash(pen->cr, lengths, dash[curve].n, 0.0);
}

void rg_pen_text(const rg_pen *pen, double x, double y, rg_align align, const char *text)
{
    cairo_text_extents_t extents;
    cairo_text_extents(pen->cr, text, &extents);
    cairo_set_source_rgb(pen->cr, 0.13, 0.13, 0.15);
    cairo_move_to(pen->cr, x - 0.5 * (double)align * extents.x_advance, y);
    cairo_show_text(pen->cr, text);
}

void rg_pen_title(const rg_pen *pen)
{
    if (!pen->plot->title[0]) return;
    cairo_select_font_face(pen->cr, "sans-serif", CAIRO_FONT_SLANT_NORMAL, CAIRO_FONT_WEIGHT_BOLD);
    rg_pen_text(pen, 0.5 * pen->width, 1.6 * pen->em, RG_MIDDLE, pen->plot->title);
    cairo_select_font_face(pen->cr, "sans-serif", CAIRO_FONT_SLANT_NORMAL, CAIRO_FONT_WEIGHT_NORMAL);
}

double rg_pen_legend_height(const rg_plot *plot, double em)
{
    return 1.5 * em * (double)((plot->n_curves + LEGEND_COLUMNS - 1) / LEGEND_COLUMNS) + 0.5 * em;
}

void rg_pen_legend(const rg_pen *pen, double y)
{
    const size_t n = pen->plot->n_curves, columns = n > 1 ? LEGEND_COLUMNS : 1;
    for (size_t i = 0; i < n; i++) {
        const double x = 2.0 * pen->em + (pen->width - 4.0 * pen->em) / (double)columns * (double)(i % columns);
        const double line_y = y + 1.5 * pen->em * (double)(i / columns) + 0.6 * pen->em;
        rg_pen_curve(pen, i);
        cairo_set_line_width(pen->cr, pen->em * 0.14);
        cairo_move_to(pen->cr, x, line_y);
        cairo_line_to(pen->cr, x + 2.6 * pen->em, line_y);
        cairo_stroke(pen->cr);
        rg_pen_text(pen, x + 3.1 * pen->em, line_y + 0.35 * pen->em, RG_LEFT, pen->plot->curve[i].label);
    }
}
