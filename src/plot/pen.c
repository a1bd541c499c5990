/* pen.c - colours, dashes, text */
#include "plot/pen.h"
#include <math.h>
#include <stdio.h>
#include <string.h>

/* Distinct for all common kinds of colour vision (M. Okabe, K. Ito, 2008), and a grey; the dashes keep them apart in print without colour. */
static const struct { double r, g, b; } colour[RG_PLOT_MOST_CURVES] = {
    {0.000, 0.447, 0.698}, {0.835, 0.369, 0.000}, {0.000, 0.620, 0.451}, {0.800, 0.475, 0.655},
    {0.000, 0.000, 0.000}, {0.902, 0.624, 0.000}, {0.337, 0.706, 0.914}, {0.450, 0.450, 0.450}};
static const struct { int n; double of_em[6]; } dash[RG_PLOT_MOST_CURVES] = {
    {0, {0}}, {2, {0.45, 0.25}}, {2, {0.12, 0.2}}, {4, {0.6, 0.2, 0.12, 0.2}}, {2, {0.9, 0.25}}, {6, {0.6, 0.2, 0.12, 0.15, 0.12, 0.2}},
    {2, {0.25, 0.4}}, {4, {0.9, 0.2, 0.3, 0.2}}};

enum { MOST_COLUMNS = 3, TEXT_ROOM = 400 };

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
    double lengths[6];
    for (int i = 0; i < dash[curve].n; i++) lengths[i] = dash[curve].of_em[i] * pen->em;
    cairo_set_source_rgb(pen->cr, colour[curve].r, colour[curve].g, colour[curve].b);
    cairo_set_line_width(pen->cr, pen->em * 0.085);
    cairo_set_line_join(pen->cr, CAIRO_LINE_JOIN_ROUND);
    cairo_set_dash(pen->cr, lengths, dash[curve].n, 0.0);
}

void rg_pen_band(const rg_pen *pen, size_t curve)
{
    cairo_set_source_rgba(pen->cr, colour[curve].r, colour[curve].g, colour[curve].b, 0.3);
}

/* Bytes of the UTF-8 character at text; 0: it is none (RFC 3629), or no printable one. */
static size_t character(const unsigned char *c)
{
    if (c[0] < 0x80) return c[0] >= 0x20 && c[0] != 0x7f;
    const size_t n = c[0] >= 0xc2 && c[0] < 0xe0 ? 2 : (c[0] & 0xf0) == 0xe0 ? 3 : c[0] >= 0xf0 && c[0] < 0xf5 ? 4 : 0;
    for (size_t i = 1; i < n; i++)
        if ((c[i] & 0xc0) != 0x80) return 0;
    if ((c[0] == 0xe0 && c[1] < 0xa0) || (c[0] == 0xed && c[1] > 0x9f) || (c[0] == 0xf0 && c[1] < 0x90) || (c[0] == 0xf4 && c[1] > 0x8f)) return 0;
    return n;
}

/* What can be shown of a text: cairo draws nothing at all of one that is not UTF-8. */
static void make_plain(char out[TEXT_ROOM], const char *text)
{
    size_t used = 0;
    while (*text && used + 5 < TEXT_ROOM) {
        const size_t n = character((const unsigned char *)text);
        memcpy(out + used, n ? text : "?", n ? n : 1);
        used += n ? n : 1;
        text += n ? n : 1;
    }
    out[used] = 0;
}

static double plain_width(const rg_pen *pen, const char *text)
{
    cairo_text_extents_t extents;
    cairo_text_extents(pen->cr, text, &extents);
    return extents.x_advance;
}

double rg_pen_text_width(const rg_pen *pen, const char *text)
{
    char plain[TEXT_ROOM];
    make_plain(plain, text);
    return plain_width(pen, plain);
}

static bool goes_on(char c) { return ((unsigned char)c & 0xc0) == 0x80; }

/* Takes characters out of the middle until text fits: names of files differ at their ends. */
static void shorten(const rg_pen *pen, char text[TEXT_ROOM], double most_width)
{
    char whole[TEXT_ROOM];
    if (plain_width(pen, text) <= most_width) return;
    strcpy(whole, text);
    const size_t n = strlen(whole);
    for (size_t left = n / 2, right = n / 2; left > 1; ) {
        if (left >= n - right) do left--; while (left > 0 && goes_on(whole[left]));
        else do right++; while (right < n && goes_on(whole[right]));
        snprintf(text, TEXT_ROOM, "%.*s...%s", (int)left, whole, whole + right);
        if (plain_width(pen, text) <= most_width) return;
    }
}

void rg_pen_text(const rg_pen *pen, double x, double y, rg_align align, double most_width, const char *text)
{
    char plain[TEXT_ROOM];
    make_plain(plain, text);
    shorten(pen, plain, most_width);
    cairo_set_source_rgb(pen->cr, 0.13, 0.13, 0.15);
    cairo_move_to(pen->cr, x - 0.5 * (double)align * plain_width(pen, plain), y);
    cairo_show_text(pen->cr, plain);
    cairo_new_path(pen->cr);
}

void rg_pen_number(char text[32], double v) { snprintf(text, 32, "%.10g", v); }

double rg_pen_heading_height(const rg_plot *plot, double em)
{
    return (plot->title[0] ? 1.7 * em : 0.0) + (plot->note[0] ? 1.4 * em : 0.0) + 1.0 * em;
}

void rg_pen_heading(const rg_pen *pen)
{
    double y = 0.5 * pen->em;
    if (pen->plot->title[0]) {
        y += 1.2 * pen->em;
        cairo_select_font_face(pen->cr, "sans-serif", CAIRO_FONT_SLANT_NORMAL, CAIRO_FONT_WEIGHT_BOLD);
        rg_pen_text(pen, 0.5 * pen->width, y, RG_MIDDLE, pen->width - 2.0 * pen->em, pen->plot->title);
        cairo_select_font_face(pen->cr, "sans-serif", CAIRO_FONT_SLANT_NORMAL, CAIRO_FONT_WEIGHT_NORMAL);
    }
    if (pen->plot->note[0]) rg_pen_text(pen, 0.5 * pen->width, y + 1.4 * pen->em, RG_MIDDLE, pen->width - 2.0 * pen->em, pen->plot->note);
}

/* As many columns as the longest label leaves; a character has about 0.6 em, and one that is wider than that will be shortened. */
static size_t n_columns(const rg_plot *plot, double *column_em)
{
    size_t longest = 0;
    for (size_t i = 0; i < plot->n_curves; i++) longest = strlen(plot->curve[i].label) > longest ? strlen(plot->curve[i].label) : longest;
    const double all_em = 44.0, wanted_em = 0.62 * (double)longest + 5.0;
    size_t columns = plot->n_curves < MOST_COLUMNS ? plot->n_curves : MOST_COLUMNS;
    while (columns > 1 && wanted_em * (double)columns > all_em) columns--;
    if (plot->n_curves == 4 && columns == 3) columns = 2;
    *column_em = fmin(wanted_em, all_em / (double)columns);
    return columns;
}

double rg_pen_legend_height(const rg_plot *plot, double em)
{
    double column_em;
    const size_t columns = n_columns(plot, &column_em);
    return 1.5 * em * (double)((plot->n_curves + columns - 1) / columns) + 0.5 * em;
}

void rg_pen_legend(const rg_pen *pen, double y)
{
    double column_em;
    const size_t n = pen->plot->n_curves, columns = n_columns(pen->plot, &column_em);
    const double column = column_em * pen->em, first_x = 0.5 * (pen->width - column * (double)columns) + 0.5 * pen->em;
    for (size_t i = 0; i < n; i++) {
        const double x = first_x + column * (double)(i % columns), line_y = y + 1.5 * pen->em * (double)(i / columns) + 0.6 * pen->em;
        rg_pen_curve(pen, i);
        cairo_set_line_width(pen->cr, pen->em * 0.14);
        cairo_move_to(pen->cr, x, line_y);
        cairo_line_to(pen->cr, x + 2.6 * pen->em, line_y);
        cairo_stroke(pen->cr);
        rg_pen_text(pen, x + 3.1 * pen->em, line_y + 0.35 * pen->em, RG_LEFT, column - 3.8 * pen->em, pen->plot->curve[i].label);
    }
}
