/* mesh_picture.c - a mesh as a PNG */
#include "plot/mesh_picture.h"
#include "base/out_file.h"
#include "plot/mesh_view.h"
#include <cairo.h>
#include <stdlib.h>
#include <string.h>

enum { LEGEND_MOST = 20 };
#define INK 0x2b2b30u
#define PALE_INK 0x6f6f78u

/* Where things stand, in pixels; all follows from the width. */
typedef struct {
    double width, height, em, margin;
    double view_x, view_y, foot_y, key_x;       /* key: the list of parts */
    size_t key_rows, key_columns;
} layout;

typedef struct { size_t part; double shown_px; } shown_part;

static void set_colour(cairo_t *cr, uint32_t rgb)
{
    cairo_set_source_rgb(cr, (rgb >> 16 & 255u) / 255.0, (rgb >> 8 & 255u) / 255.0, (rgb & 255u) / 255.0);
}

static double text_width(cairo_t *cr, const char *text)
{
    cairo_text_extents_t extents;
    cairo_text_extents(cr, text, &extents);
    return extents.x_advance;
}

static void set_font(cairo_t *cr, double size, cairo_font_weight_t weight)
{
    cairo_select_font_face(cr, "sans-serif", CAIRO_FONT_SLANT_NORMAL, weight);
    cairo_set_font_size(cr, size);
}

/* Shortened with an ellipsis where it is wider than room. Never cuts a UTF-8 character in two. */
static void put_text(cairo_t *cr, double x, double y, double room, const char *text)
{
    char shown[256];
    size_t n = strlen(text);
    if (n > sizeof shown - 4) n = sizeof shown - 4;
    for (bool cut = n < strlen(text);; cut = true) {
        while (n > 0 && ((unsigned char)text[n] & 0xc0) == 0x80) n--;
        memcpy(shown, text, n);
        strcpy(shown + n, cut ? "\xe2\x80\xa6" : "");
        if (n == 0 || text_width(cr, shown) <= room) break;
        n--;
    }
    cairo_move_to(cr, x, y);
    cairo_show_text(cr, shown);
}

static int by_shown(const void *a, const void *b)
{
    const shown_part *x = a, *y = b;
    if (x->shown_px != y->shown_px) return x->shown_px < y->shown_px ? 1 : -1;
    return (x->part > y->part) - (x->part < y->part);
}

static layout lay_out(const rg_mesh_picture *picture, size_t n_key)
{
    layout l = {.width = picture->width_px, .em = fmin(fmax(picture->width_px / 58.0, 11.0), 30.0)};
    l.margin = 1.2 * l.em;
    l.view_x = ceil(l.margin);
    l.view_y = ceil(l.margin + 5.2 * l.em);
    l.key_x = l.margin + 12.5 * l.em;
    l.key_columns = (size_t)fmax(1.0, floor((l.width - l.margin - l.key_x) / (13.0 * l.em)));
    l.key_rows = (n_key + l.key_columns - 1) / l.key_columns;
    return l;
}

static void draw_title(cairo_t *cr, const layout *l, const rg_mesh_picture *picture)
{
    const double room = l->width - 2.0 * l->margin;
    set_colour(cr, INK);
    set_font(cr, 1.3 * l->em, CAIRO_FONT_WEIGHT_BOLD);
    put_text(cr, l->margin, l->margin + 1.2 * l->em, room, picture->title);
    set_font(cr, l->em, CAIRO_FONT_WEIGHT_NORMAL);
    for (int i = 0; i < 2; i++)
        if (picture->note[i]) put_text(cr, l->margin, l->margin + (2.9 + 1.4 * i) * l->em, room, picture->note[i]);
}

/* An arrow from (0, 0) to the tip, its label beyond; toward the viewer with a full line, away from him dashed. */
static void draw_axis(cairo_t *cr, double em, double x, double y, bool away, const char *label)
{
    const double length = hypot(x, y), dash[2] = {0.25 * em, 0.2 * em};
    const double label_px = text_width(cr, label);
    cairo_save(cr);
    cairo_set_line_width(cr, 0.16 * em);
    if (length < 0.7 * em) {            /* along the line of sight: its head, or its tail, as on paper */
        cairo_new_path(cr);
        cairo_arc(cr, 0, 0, 0.42 * em, 0, 6.2832);
        set_colour(cr, RG_VIEW_BACKGROUND);
        cairo_fill_preserve(cr);
        set_colour(cr, INK);
        cairo_stroke(cr);
        if (away) {
            cairo_move_to(cr, -0.27 * em, -0.27 * em), cairo_line_to(cr, 0.27 * em, 0.27 * em);
            cairo_move_to(cr, -0.27 * em, 0.27 * em), cairo_line_to(cr, 0.27 * em, -0.27 * em);
        } else {
            cairo_arc(cr, 0, 0, 0.08 * em, 0, 6.2832);
        }
        cairo_stroke(cr);
        cairo_move_to(cr, -0.6 * em - label_px, 1.2 * em);
    } else {
        const double ux = x / length, uy = y / length;
        set_colour(cr, INK);
        cairo_set_dash(cr, dash, away ? 2 : 0, 0);
        cairo_move_to(cr, 0, 0);
        cairo_line_to(cr, x, y);
        cairo_stroke(cr);
        cairo_set_dash(cr, dash, 0, 0);
        cairo_move_to(cr, x + 0.45 * em * ux, y + 0.45 * em * uy);
        cairo_line_to(cr, x - 0.25 * em * uy, y + 0.25 * em * ux);
        cairo_line_to(cr, x + 0.25 * em * uy, y - 0.25 * em * ux);
        cairo_close_path(cr);
        cairo_fill(cr);
        const double room = 0.75 * em;      /* the label's middle keeps clear of the tip on whichever side it comes to stand */
        cairo_move_to(cr, x + ux * (room + 0.5 * label_px) - 0.5 * label_px, y + uy * (room + 0.35 * em) + 0.35 * em);
    }
    set_colour(cr, INK);
    cairo_show_text(cr, label);
    cairo_restore(cr);
}

static void draw_axes(cairo_t *cr, const layout *l, const rg_mesh_view *view)
{
    static const char *const label[3] = {"x front", "y left", "z up"};
    const double right[3] = {view->right.x, view->right.y, view->right.z}, up[3] = {view->up.x, view->up.y, view->up.z};
    const double toward[3] = {view->toward.x, view->toward.y, view->toward.z}, length = 2.6 * l->em;
    int order[3] = {0, 1, 2};           /* the nearest last */
    for (int pass = 0; pass < 2; pass++)
        for (int i = 0; i < 2; i++)
            if (toward[order[i]] > toward[order[i + 1]]) {
                const int swap = order[i];
                order[i] = order[i + 1], order[i + 1] = swap;
            }
    cairo_save(cr);
    cairo_translate(cr, l->margin + 5.6 * l->em, l->foot_y + 4.6 * l->em);
    set_font(cr, l->em, CAIRO_FONT_WEIGHT_NORMAL);
    for (int i = 0; i < 3; i++) {
        const int a = order[i];
        draw_axis(cr, l->em, length * right[a], -length * up[a], toward[a] < -1e-9, label[a]);
    }
    cairo_restore(cr);
}

/* The longest of 1, 2, 5, 10 ... that fits into room_px. */
static double round_length_m(double px_m, double room_px)
{
    const double most_m = px_m * room_px, decade_m = pow(10.0, floor(log10(most_m)));
    return most_m >= 5.0 * decade_m ? 5.0 * decade_m : most_m >= 2.0 * decade_m ? 2.0 * decade_m : decade_m;
}

static void draw_scale(cairo_t *cr, const layout *l, const rg_mesh_view *view)
{
    const double length_m = round_length_m(view->px_m, 10.5 * l->em), x = l->margin, y = l->foot_y + 10.6 * l->em;
    const double end = x + length_m / view->px_m, tick = 0.4 * l->em;
    char label[32];
    snprintf(label, sizeof label, length_m >= 0.999 ? "%.0f m" : "%g mm", length_m >= 0.999 ? length_m : 1e3 * length_m);
    set_colour(cr, INK);
    cairo_set_line_width(cr, 0.16 * l->em);
    cairo_move_to(cr, x, y - tick), cairo_line_to(cr, x, y + tick);
    cairo_move_to(cr, end, y - tick), cairo_line_to(cr, end, y + tick);
    cairo_move_to(cr, x, y), cairo_line_to(cr, end, y);
    cairo_stroke(cr);
    set_font(cr, l->em, CAIRO_FONT_WEIGHT_NORMAL);
    put_text(cr, x, y - 0.7 * l->em, l->width, label);
}

static void draw_key(cairo_t *cr, const layout *l, const rg_mesh *mesh, const shown_part list[], size_t n_list, size_t n_seen)
{
    const double column = (l->width - l->margin - l->key_x) / (double)l->key_columns;
    set_font(cr, l->em, CAIRO_FONT_WEIGHT_NORMAL);
    for (size_t i = 0; i < n_list; i++) {
        const double x = l->key_x + column * (double)(i / l->key_rows), y = l->foot_y + (1.5 * (double)(i % l->key_rows) + 0.6) * l->em;
        if (i + 1 == LEGEND_MOST && n_seen > LEGEND_MOST) {
            char more[64];
            snprintf(more, sizeof more, "and %zu smaller parts", n_seen - LEGEND_MOST + 1);
            set_colour(cr, PALE_INK);
            put_text(cr, x, y + 0.9 * l->em, column - 1.0 * l->em, more);
            break;
        }
        cairo_rectangle(cr, x, y, 1.1 * l->em, 1.1 * l->em);
        set_colour(cr, rg_part_colour(list[i].part));
        cairo_fill_preserve(cr);
        set_colour(cr, PALE_INK);
        cairo_set_line_width(cr, 1.0);
        cairo_stroke(cr);
        set_colour(cr, INK);
        put_text(cr, x + 1.6 * l->em, y + 0.9 * l->em, column - 2.4 * l->em, mesh->part_name[list[i].part]);
    }
}

static cairo_status_t write_bytes(void *stream, const unsigned char *bytes, unsigned n)
{
    return fwrite(bytes, 1, n, stream) == n ? CAIRO_STATUS_SUCCESS : CAIRO_STATUS_WRITE_ERROR;
}

static rg_status write_png(cairo_surface_t *surface, const char *path, rg_error *err)
{
    rg_out_file *file = NULL;
    rg_status status = rg_out_file_open(&file, path, err);
    if (status) return status;
    const cairo_status_t done = cairo_surface_write_to_png_stream(surface, write_bytes, rg_out_file_stream(file));
    if (done == CAIRO_STATUS_SUCCESS) return rg_out_file_keep(file, err);
    rg_out_file_drop(file);
    return rg_fail(err, done == CAIRO_STATUS_NO_MEMORY ? RG_NO_MEMORY : RG_SYSTEM, "%s: %s", path, cairo_status_to_string(done));
}

/* list[n_parts]: those that are seen first. Returns how many. */
static size_t sort_parts(const rg_mesh *mesh, const double shown_px[], shown_part list[])
{
    size_t n_seen = 0;
    for (size_t p = 0; p < mesh->n_parts; p++) {
        list[p] = (shown_part){p, shown_px[p]};
        n_seen += shown_px[p] > 0.0;
    }
    qsort(list, mesh->n_parts, sizeof *list, by_shown);
    return n_seen;
}

static rg_status compose(const rg_mesh *mesh, const rg_mesh_picture *picture, const rg_mesh_view *view, uint32_t pixel[],
                         const shown_part list[], size_t n_seen, const char *path, rg_error *err)
{
    const size_t n_list = n_seen < LEGEND_MOST ? n_seen : LEGEND_MOST;
    layout l = lay_out(picture, n_list);
    l.foot_y = l.view_y + view->height + 0.8 * l.em;
    l.height = ceil(l.foot_y + fmax(11.6, 1.5 * (double)l.key_rows + 0.6) * l.em + 0.4 * l.margin);
    cairo_surface_t *surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, picture->width_px, (int)l.height);
    cairo_surface_t *image = cairo_image_surface_create_for_data((unsigned char *)pixel, CAIRO_FORMAT_RGB24, view->width, view->height,
                                                                 4 * view->width);
    cairo_t *cr = cairo_create(surface);
    set_colour(cr, RG_VIEW_BACKGROUND);
    cairo_paint(cr);
    cairo_set_source_surface(cr, image, l.view_x, l.view_y);
    cairo_paint(cr);
    draw_title(cr, &l, picture);
    draw_axes(cr, &l, view);
    draw_scale(cr, &l, view);
    draw_key(cr, &l, mesh, list, n_list, n_seen);
    const cairo_status_t drawn = cairo_status(cr);
    cairo_destroy(cr);
    cairo_surface_destroy(image);
    const rg_status status = drawn == CAIRO_STATUS_SUCCESS ? write_png(surface, path, err) :
        rg_fail(err, drawn == CAIRO_STATUS_NO_MEMORY ? RG_NO_MEMORY : RG_SYSTEM, "the picture cannot be drawn: %s", cairo_status_to_string(drawn));
    cairo_surface_destroy(surface);
    return status;
}

rg_status rg_mesh_picture_write(const rg_mesh *mesh, const rg_mesh_picture *picture, const char *path, rg_error *err)
{
    if (picture->width_px < RG_PICTURE_LEAST_PX || picture->width_px > RG_PICTURE_MOST_PX)
        return rg_fail(err, RG_BAD_VALUE, "a picture is %d to %d pixels wide, not %d", RG_PICTURE_LEAST_PX, RG_PICTURE_MOST_PX, picture->width_px);
    if (!isfinite(picture->az_rad) || !isfinite(picture->el_rad))
        return rg_fail(err, RG_BAD_VALUE, "the picture's direction (%g, %g rad) is not finite", picture->az_rad, picture->el_rad);
    const int width = picture->width_px - 2 * (int)ceil(lay_out(picture, 1).margin);
    const rg_mesh_view view = rg_mesh_view_from(mesh, picture->az_rad, picture->el_rad, width, width / 5, (int)(0.75 * width));
    uint32_t *pixel = malloc((size_t)view.width * (size_t)view.height * sizeof *pixel);
    double *shown_px = malloc(mesh->n_parts * sizeof *shown_px);
    shown_part *list = malloc(mesh->n_parts * sizeof *list);
    rg_status status = pixel && shown_px && list ? rg_mesh_view_paint(mesh, &view, pixel, shown_px, err) :
                       rg_fail(err, RG_NO_MEMORY, "no memory for a picture of %d by %d pixels", view.width, view.height);
    if (!status) status = compose(mesh, picture, &view, pixel, list, sort_parts(mesh, shown_px, list), path, err);
    free(pixel);
    free(shown_px);
    free(list);
    return status;
}
