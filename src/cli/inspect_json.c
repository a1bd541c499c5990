/* inspect_json.c - what `inspect` found, as JSON (RFC 8259): lengths in metres, and null where there is no finite number */
#include "cli/inspect_report.h"
#include <errno.h>
#include <math.h>
#include <string.h>

#define DEG_PER_RAD 57.295779513082321

/* Length of the UTF-8 character that begins at s, by its well-formed sequences (Unicode, table 3-7); 0 when it is none. */
static size_t utf8_length(const unsigned char *s)
{
    const size_t n = s[0] < 0x80 ? 1 : s[0] >= 0xc2 && s[0] < 0xe0 ? 2 : s[0] >= 0xe0 && s[0] < 0xf0 ? 3 : s[0] >= 0xf0 && s[0] < 0xf5 ? 4 : 0;
    for (size_t i = 1; i < n; i++)
        if ((s[i] & 0xc0) != 0x80) return 0;
    if ((s[0] == 0xe0 && s[1] < 0xa0) || (s[0] == 0xed && s[1] > 0x9f) || (s[0] == 0xf0 && s[1] < 0x90) || (s[0] == 0xf4 && s[1] > 0x8f)) return 0;
    return n;
}

static void put_string(FILE *out, const char *text)
{
    const unsigned char *s = (const unsigned char *)text;
    fputc('"', out);
    while (*s) {
        const size_t n = utf8_length(s);
        if (n == 0) fputs("\\ufffd", out), s++;
        else if (*s == '"' || *s == '\\') fprintf(out, "\\%c", *s++);
        else if (*s < 0x20 || *s == 0x7f) fprintf(out, "\\u%04x", *s++);
        else fwrite(s, 1, n, out), s += n;
    }
    fputc('"', out);
}

/* What comes before each value: a comma when it is not the first, a new line, the depth. */
static void put_key(FILE *out, const char *before, const char *key)
{
    fprintf(out, "%s\"%s\": ", before, key);
}

static void put_text(FILE *out, const char *before, const char *key, const char *text)
{
    put_key(out, before, key);
    put_string(out, text);
}

static void put_count(FILE *out, const char *before, const char *key, size_t n)
{
    put_key(out, before, key);
    fprintf(out, "%zu", n);
}

static void put_value(FILE *out, double x)
{
    if (isfinite(x)) fprintf(out, "%.10g", x + 0.0);
    else fputs("null", out);
}

static void put_number(FILE *out, const char *before, const char *key, double x)
{
    put_key(out, before, key);
    put_value(out, x);
}

static void put_numbers(FILE *out, const char *before, const char *key, size_t n, const double x[])
{
    put_key(out, before, key);
    for (size_t i = 0; i < n; i++) {
        fputs(i ? ", " : "[", out);
        put_value(out, x[i]);
    }
    fputc(']', out);
}

#define FIRST "{\n  "
#define NEXT ",\n  "
#define INNER_FIRST "{\n    "
#define INNER_NEXT ",\n    "

static void put_repairs(FILE *out, const rg_mesh_report *r)
{
    put_key(out, NEXT, "repairs");
    put_count(out, INNER_FIRST, "facets_read", r->n_facets_read);
    put_count(out, INNER_NEXT, "polygons_cut", r->n_polygons_cut);
    put_count(out, INNER_NEXT, "not_facets", r->n_not_facets);
    put_count(out, INNER_NEXT, "vertices_welded", r->n_vertices_welded);
    put_count(out, INNER_NEXT, "facets_degenerate", r->n_degenerate);
    put_count(out, INNER_NEXT, "facets_duplicate", r->n_duplicate);
    put_count(out, INNER_NEXT, "facets_turned", r->n_facets_turned);
    put_count(out, INNER_NEXT, "shells_turned", r->n_shells_turned);
    put_count(out, INNER_NEXT, "boundary_edges", r->n_boundary_edges);
    put_count(out, INNER_NEXT, "branch_edges", r->n_branch_edges);
    put_number(out, INNER_NEXT, "weld_m", r->weld_m);
    put_number(out, INNER_NEXT, "coordinate_step_m", r->coordinate_step_m);
    fputs("\n  }", out);
}

static void put_parts(FILE *out, const rg_inspection *i)
{
    put_key(out, NEXT, "parts");
    for (size_t p = 0; p < rg_mesh_n_parts(i->mesh); p++) {
        put_text(out, p ? ",\n    {" : "[\n    {", "name", rg_mesh_part_name(i->mesh, p));
        put_count(out, ", ", "facets", rg_mesh_part_n_facets(i->mesh, p));
        put_number(out, ", ", "area_m2", rg_mesh_part_area_m2(i->mesh, p));
        put_number(out, ", ", "sagitta_m", i->part_sagitta_m[p]);
        fputc('}', out);
    }
    fputs("\n  ]", out);
}

static void put_fitness(FILE *out, const rg_inspection *i)
{
    const rg_fitness *f = &i->fitness;
    put_key(out, NEXT, "tessellation");
    put_numbers(out, INNER_FIRST, "edge_m", 5, f->edge_m);
    put_numbers(out, INNER_NEXT, "sagitta_m", 3, f->sagitta_m);
    put_number(out, INNER_NEXT, "curved_area_m2", f->curved_area_m2);
    put_number(out, INNER_NEXT, "feature_turn_deg", f->feature_turn_rad * DEG_PER_RAD);
    put_count(out, INNER_NEXT, "feature_edges", f->n_feature_edges);
    put_count(out, INNER_NEXT, "unsure_edges", f->n_unsure_edges);
    put_number(out, INNER_NEXT, "unsure_sagitta_m", f->unsure_sagitta_m);
    put_text(out, INNER_NEXT, "worst_part", rg_mesh_part_name(i->mesh, f->worst_part));
    put_number(out, INNER_NEXT, "fit_up_to_hz", f->fit_up_to_hz);
    put_number(out, INNER_NEXT, "largest_dimension_m", f->size_m);
    fputs("\n  }", out);
    if (i->freq_hz <= 0.0) return;
    double edge_wavelengths[5];
    for (int p = 0; p < 5; p++) edge_wavelengths[p] = f->edge_m[p] / f->wavelength_m;
    put_key(out, NEXT, "frequency");
    put_number(out, INNER_FIRST, "freq_hz", i->freq_hz);
    put_number(out, INNER_NEXT, "wavelength_m", f->wavelength_m);
    put_numbers(out, INNER_NEXT, "edge_wavelengths", 5, edge_wavelengths);
    put_number(out, INNER_NEXT, "over_area_m2", f->over_area_m2);
    put_number(out, INNER_NEXT, "edge_needed_m", f->edge_needed_m);
    put_number(out, INNER_NEXT, "far_field_m", f->far_field_m);
    put_number(out, INNER_NEXT, "aspect_step_deg", f->aspect_step_rad * DEG_PER_RAD);
    put_key(out, INNER_NEXT, "fit");
    fprintf(out, "%s\n  }", f->fit ? "true" : "false");
}

rg_status rg_inspection_json(FILE *out, const rg_inspection *inspection, rg_error *err)
{
    const rg_mesh_report *r = rg_mesh_get_report(inspection->mesh);
    double size_m[3];
    for (int i = 0; i < 3; i++) size_m[i] = r->high_m[i] - r->low_m[i];
    put_text(out, FIRST, "file", inspection->path);
    put_text(out, NEXT, "format", r->format);
    put_text(out, NEXT, "assumed", r->assumed);
    put_number(out, NEXT, "unit_m", r->unit_m);
    put_numbers(out, NEXT, "size_m", 3, size_m);
    put_numbers(out, NEXT, "low_m", 3, r->low_m);
    put_numbers(out, NEXT, "high_m", 3, r->high_m);
    put_count(out, NEXT, "facets", rg_mesh_n_facets(inspection->mesh));
    put_count(out, NEXT, "vertices", rg_mesh_n_vertices(inspection->mesh));
    put_number(out, NEXT, "area_m2", r->area_m2);
    put_count(out, NEXT, "shells", r->n_shells);
    put_count(out, NEXT, "closed_shells", r->n_closed_shells);
    put_text(out, NEXT, "file_sha256", r->sha256);
    put_text(out, NEXT, "mesh_sha256", r->geometry_sha256);
    put_repairs(out, r);
    put_parts(out, inspection);
    put_fitness(out, inspection);
    put_key(out, NEXT, "warnings");
    fputc('[', out);
    for (size_t w = 0; w < inspection->n_warnings; w++) {
        fputs(w ? ", " : "", out);
        put_string(out, inspection->warning[w]);
    }
    fputc(']', out);
    put_text(out, NEXT, "verdict", inspection->verdict);
    fputs("\n}\n", out);
    return fflush(out) || ferror(out) ? rg_fail(err, RG_SYSTEM, "the report cannot be written: %s", strerror(errno)) : RG_OK;
}
