/* plot.c - limits, steps, and the file that a picture goes to */
#include "plot/plot.h"
#include "base/out_file.h"
#include "plot/pen.h"
#include <cairo-pdf.h>
#include <cairo-svg.h>
#include <math.h>
#include <stdbool.h>
#include <stdlib.h>
#include <string.h>

static int by_value(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

void rg_plot_limits(size_t n_curves, const rg_curve curve[], double *low_dbsm, double *high_dbsm)
{
    enum { SAMPLES = 4096 };                                /* enough for a percentile; taken evenly from all */
    double sample[SAMPLES], highest = -INFINITY;
    size_t n = 0, total = 0, seen = 0;
    for (size_t i = 0; i < n_curves; i++) total += curve[i].n;
    const size_t every = total / SAMPLES + 1;
    for (size_t i = 0; i < n_curves; i++)
        for (size_t k = 0; k < curve[i].n; k++) {
            highest = fmax(highest, curve[i].level_dbsm[k]);
            if (seen++ % every == 0 && n < SAMPLES) sample[n++] = curve[i].level_dbsm[k];
        }
    if (n == 0) { highest = 0.0; sample[n++] = 0.0; }
    qsort(sample, n, sizeof sample[0], by_value);
    *high_dbsm = 5.0 * ceil(highest / 5.0 + 1e-9);
    *low_dbsm = fmax(fmin(10.0 * floor(sample[n / 20] / 10.0), *high_dbsm - 30.0), *high_dbsm - 60.0);
}

double rg_plot_step(double low, double high, int n)
{
    const double rough = (high - low) / n, power = pow(10.0, floor(log10(rough)));
    const double digit = rough / power;
    return power * (digit < 1.5 ? 1.0 : digit < 3.5 ? 2.0 : digit < 7.5 ? 5.0 : 10.0);
}

static cairo_status_t write_bytes(void *file, const unsigned char *bytes, unsigned n)
{
    return fwrite(bytes, 1, n, file) == n ? CAIRO_STATUS_SUCCESS : CAIRO_STATUS_WRITE_ERROR;
}

typedef enum { SVG, PNG, PDF, N_FORMATS } format;

static format format_of(const char *path)
{
    static const char *const ending[N_FORMATS] = {".svg", ".png", ".pdf"};
    const size_t n = strlen(path);
    int f = 0;
    while (f < N_FORMATS && (n < 5 || strcmp(path + n - 4, ending[f]) != 0)) f++;
    return (format)f;
}

static cairo_surface_t *make_surface(format f, FILE *file, double width, double height)
{
    switch (f) {
    case SVG: return cairo_svg_surface_create_for_stream(write_bytes, file, width, height);
    case PDF: return cairo_pdf_surface_create_for_stream(write_bytes, file, width, height);
    default: return cairo_image_surface_create(CAIRO_FORMAT_RGB24, (int)width, (int)height);
    }
}

static void draw(const rg_plot *plot, cairo_surface_t *surface, double width, double height)
{
    cairo_t *cr = cairo_create(surface);
    rg_pen pen = {.cr = cr, .width = width, .height = height, .em = width / 46.0, .plot = plot};
    rg_plot_limits(plot->n_curves, plot->curve, &pen.low_dbsm, &pen.high_dbsm);
    if (!isnan(plot->high_dbsm)) pen.high_dbsm = plot->high_dbsm;
    if (!isnan(plot->low_dbsm)) pen.low_dbsm = plot->low_dbsm;
    if (pen.low_dbsm >= pen.high_dbsm) pen.low_dbsm = isnan(plot->low_dbsm) ? pen.high_dbsm - 40.0 : pen.low_dbsm;
    if (pen.low_dbsm >= pen.high_dbsm) pen.high_dbsm = pen.low_dbsm + 40.0;
    cairo_set_source_rgb(cr, 1.0, 1.0, 1.0);
    cairo_paint(cr);
    cairo_select_font_face(cr, "sans-serif", CAIRO_FONT_SLANT_NORMAL, CAIRO_FONT_WEIGHT_NORMAL);
    cairo_set_font_size(cr, pen.em);
    (plot->kind == RG_PLOT_POLAR ? rg_draw_polar : rg_draw_cartesian)(&pen);
    cairo_destroy(cr);
}

static rg_status check(const rg_plot *plot, const char *path, rg_error *err)
{
    if (format_of(path) == N_FORMATS) return rg_fail(err, RG_BAD_VALUE, "%s: a picture's name ends in .svg, .png or .pdf", path);
    if (plot->n_curves < 1 || plot->n_curves > RG_PLOT_MOST_CURVES)
        return rg_fail(err, RG_BAD_VALUE, "%zu curves: a picture holds 1 to %d", plot->n_curves, RG_PLOT_MOST_CURVES);
    if (plot->low_dbsm >= plot->high_dbsm)
        return rg_fail(err, RG_BAD_VALUE, "the lowest level %g is not under the highest, %g", plot->low_dbsm, plot->high_dbsm);
    if (plot->width_px < RG_PLOT_LEAST_PX || plot->width_px > RG_PLOT_MOST_PX)
        return rg_fail(err, RG_BAD_VALUE, "a width of %d: it must be %d to %d", plot->width_px, RG_PLOT_LEAST_PX, RG_PLOT_MOST_PX);
    return RG_OK;
}

rg_status rg_plot_write(const rg_plot *plot, const char *path, rg_error *err)
{
    rg_out_file *file = NULL;
    rg_status status = check(plot, path, err);
    if (!status) status = rg_out_file_open(&file, path, err);
    if (status) return status;
    const double width = plot->width_px, em = width / 46.0;
    const double height = floor((plot->kind == RG_PLOT_POLAR ? 0.93 : 0.58) * width + rg_pen_legend_height(plot, em));
    const format f = format_of(path);
    cairo_surface_t *surface = make_surface(f, rg_out_file_stream(file), width, height);
    draw(plot, surface, width, height);
    cairo_status_t drawn = cairo_surface_status(surface);
    if (f == PNG && drawn == CAIRO_STATUS_SUCCESS) drawn = cairo_surface_write_to_png_stream(surface, write_bytes, rg_out_file_stream(file));
    cairo_surface_finish(surface);
    if (drawn == CAIRO_STATUS_SUCCESS) drawn = cairo_surface_status(surface);
    cairo_surface_destroy(surface);
    if (drawn == CAIRO_STATUS_SUCCESS) return rg_out_file_keep(file, err);
    rg_out_file_drop(file);
    return rg_fail(err, drawn == CAIRO_STATUS_NO_MEMORY ? RG_NO_MEMORY : RG_SYSTEM, "%s cannot be drawn: %s", path, cairo_status_to_string(drawn));
}
