/* plot.c - the file that a picture goes to */
#include "plot/plot.h"
#include "base/out_file.h"
#include "plot/pen.h"
#include <cairo-pdf.h>
#include <cairo-svg.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

#define POINTS_PER_PIXEL 0.75   /* 72/96: a pixel of SVG and CSS */

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
    while (f < N_FORMATS && (n < 5 || strcasecmp(path + n - 4, ending[f]) != 0)) f++;
    return (format)f;
}

rg_status rg_plot_check_path(const char *path, rg_error *err)
{
    return format_of(path) < N_FORMATS ? RG_OK : rg_fail(err, RG_BAD_VALUE, "%s: a picture's name ends in .svg, .png or .pdf", path);
}

static cairo_surface_t *make_surface(format f, FILE *file, double width, double height)
{
    cairo_surface_t *surface;
    switch (f) {
    case SVG:
        surface = cairo_svg_surface_create_for_stream(write_bytes, file, width, height);
        cairo_svg_surface_set_document_unit(surface, CAIRO_SVG_UNIT_PX);
        return surface;
    case PDF:
        surface = cairo_pdf_surface_create_for_stream(write_bytes, file, width * POINTS_PER_PIXEL, height * POINTS_PER_PIXEL);
        cairo_pdf_surface_set_metadata(surface, CAIRO_PDF_METADATA_CREATE_DATE, NULL);      /* the same bytes at any time */
        return surface;
    default: return cairo_image_surface_create(CAIRO_FORMAT_RGB24, (int)width, (int)height);
    }
}

static void find_limits(const rg_plot *plot, double *low, double *high)
{
    rg_plot_limits(plot->n_curves, plot->curve, low, high);
    if (!isnan(plot->high_dbsm)) *high = plot->high_dbsm;
    if (!isnan(plot->low_dbsm)) *low = plot->low_dbsm;
    if (*low >= *high && isnan(plot->low_dbsm)) *low = *high - 40.0;
    if (*low >= *high) *high = *low + 40.0;
}

static cairo_status_t draw(const rg_plot *plot, cairo_surface_t *surface, double scale, double width, double height, rg_band *band)
{
    cairo_t *cr = cairo_create(surface);
    rg_pen pen = {.cr = cr, .width = width, .height = height, .em = width / 46.0, .plot = plot, .band = band};
    find_limits(plot, &pen.low_dbsm, &pen.high_dbsm);
    cairo_scale(cr, scale, scale);
    cairo_set_source_rgb(cr, 1.0, 1.0, 1.0);
    cairo_paint(cr);
    cairo_select_font_face(cr, "sans-serif", CAIRO_FONT_SLANT_NORMAL, CAIRO_FONT_WEIGHT_NORMAL);
    cairo_set_font_size(cr, pen.em);
    (plot->kind == RG_PLOT_POLAR ? rg_draw_polar : rg_draw_cartesian)(&pen);
    const cairo_status_t drawn = cairo_status(cr);
    cairo_destroy(cr);
    return drawn;
}

static rg_status check(const rg_plot *plot, const char *path, rg_error *err)
{
    const rg_status status = rg_plot_check_path(path, err);
    if (status) return status;
    if (plot->n_curves < 1 || plot->n_curves > RG_PLOT_MOST_CURVES)
        return rg_fail(err, RG_BAD_VALUE, "%zu curves: a picture holds 1 to %d", plot->n_curves, RG_PLOT_MOST_CURVES);
    if (plot->low_dbsm >= plot->high_dbsm)
        return rg_fail(err, RG_BAD_VALUE, "the lowest level %g is not under the highest, %g", plot->low_dbsm, plot->high_dbsm);
    if (plot->width_px < RG_PLOT_LEAST_PX || plot->width_px > RG_PLOT_MOST_PX)
        return rg_fail(err, RG_BAD_VALUE, "a width of %d: it must be %d to %d", plot->width_px, RG_PLOT_LEAST_PX, RG_PLOT_MOST_PX);
    return RG_OK;
}

static cairo_status_t draw_to(FILE *file, format f, const rg_plot *plot, rg_band *band)
{
    const double width = plot->width_px, em = width / 46.0;
    const double height = floor((plot->kind == RG_PLOT_POLAR ? 0.86 : 0.56) * width + rg_pen_heading_height(plot, em) + rg_pen_legend_height(plot, em));
    cairo_surface_t *surface = make_surface(f, file, width, height);
    cairo_status_t drawn = cairo_surface_status(surface);
    if (drawn == CAIRO_STATUS_SUCCESS) drawn = draw(plot, surface, f == PDF ? POINTS_PER_PIXEL : 1.0, width, height, band);
    if (f == PNG && drawn == CAIRO_STATUS_SUCCESS) drawn = cairo_surface_write_to_png_stream(surface, write_bytes, file);
    cairo_surface_finish(surface);
    if (drawn == CAIRO_STATUS_SUCCESS) drawn = cairo_surface_status(surface);
    cairo_surface_destroy(surface);
    return drawn;
}

rg_status rg_plot_write(const rg_plot *plot, const char *path, rg_error *err)
{
    rg_out_file *file = NULL;
    rg_status status = check(plot, path, err);
    rg_band *band = malloc(RG_PEN_MOST_BANDS * sizeof *band);
    if (!status && !band) status = rg_fail(err, RG_NO_MEMORY, "no memory to draw in");
    if (!status) status = rg_out_file_open(&file, path, err);
    if (!status) {
        const cairo_status_t drawn = draw_to(rg_out_file_stream(file), format_of(path), plot, band);
        if (drawn == CAIRO_STATUS_SUCCESS) {
            status = rg_out_file_keep(file, err);
        } else {
            rg_out_file_drop(file);
            status = rg_fail(err, drawn == CAIRO_STATUS_NO_MEMORY ? RG_NO_MEMORY : RG_SYSTEM, "%s cannot be drawn: %s", path, cairo_status_to_string(drawn));
        }
    }
    free(band);
    return status;
}
