/* inspect_report.c - what `inspect` found: the judgement in words, and as text */
#include "cli/inspect_report.h"
#include "cli/inspect_text.h"
#include <errno.h>
#include <math.h>
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>

/* Largest extents that a road object may have: an articulated road train is 18.75 m long, a bolt head on a guardrail is 33 mm wide. */
#define ROAD_MOST_M 40.0
#define ROAD_LEAST_M 0.05
/* The file's own numbers may be off by half their spacing, twice on the way of the wave: lambda/64 is under 6 degrees of phase. */
#define STEP_PER_LAMBDA (1.0 / 64.0)
#define LIMIT_PER_LAMBDA (1.0 / 16.0)
#define DEG_PER_RAD 57.295779513082321

static void extents(double size_m[3], const rg_mesh_report *r)
{
    for (int i = 0; i < 3; i++) size_m[i] = r->high_m[i] - r->low_m[i];
}

static double largest_m(const rg_mesh_report *r)
{
    double size_m[3];
    extents(size_m, r);
    return fmax(size_m[0], fmax(size_m[1], size_m[2]));
}

/* All three in one unit, so that they can be compared at a glance. */
static void size_words(rg_words words[3], const rg_mesh_report *r)
{
    double size_m[3];
    extents(size_m, r);
    for (int i = 0; i < 3; i++) rg_length_words_like(&words[i], size_m[i], largest_m(r));
}

void rg_size_text(char text[128], const rg_mesh_report *report)
{
    rg_words words[3];
    size_words(words, report);
    snprintf(text, 128, "%.30s x %.30s x %.30s", words[0].text, words[1].text, words[2].text);
}

static void warn(rg_inspection *i, const char *format, ...) RG_PRINTF(2, 3);
static void warn(rg_inspection *i, const char *format, ...)
{
    if (i->n_warnings == RG_WARNINGS_MOST) return;
    va_list args;
    va_start(args, format);
    vsnprintf(i->warning[i->n_warnings++], sizeof i->warning[0], format, args);
    va_end(args);
}

/* The unit that would make a road object of the mesh, the likeliest first. */
static void warn_of_size(rg_inspection *i, const rg_mesh_report *r)
{
    static const struct { const char *name; double m; } units[] = {{"mm", 1e-3}, {"m", 1.0}, {"cm", 1e-2}, {"in", 0.0254}, {"ft", 0.3048}};
    const double now_m = largest_m(r);
    rg_words now, then;
    if (now_m >= ROAD_LEAST_M && now_m <= ROAD_MOST_M) return;
    const char *const what = now_m > ROAD_MOST_M ? "large" : "small";
    for (size_t u = 0; u < sizeof units / sizeof units[0]; u++) {
        const double then_m = now_m / r->unit_m * units[u].m;
        if (then_m < 0.1 || then_m > 25.0) continue;
        warn(i, "%s is too %s for a road object: perhaps --units %s (%s)?", rg_length_words(&now, now_m), what, units[u].name,
             rg_length_words(&then, then_m));
        return;
    }
    warn(i, "%s is too %s for a road object, in any unit", rg_length_words(&now, now_m), what);
}

static void warn_of_step(rg_inspection *i, const rg_mesh_report *r)
{
    rg_words step, lambda;
    if (i->freq_hz <= 0.0 || r->coordinate_step_m <= STEP_PER_LAMBDA * i->fitness.wavelength_m) return;
    warn(i, "the file's numbers are %s apart at its farthest coordinate, coarse for a wavelength of %s: move the mesh nearer to its origin, "
            "or write it with more digits", rg_length_words(&step, r->coordinate_step_m), rg_length_words(&lambda, i->fitness.wavelength_m));
}

static void warn_of_unsure(rg_inspection *i)
{
    rg_words off;
    if (i->fitness.n_unsure_edges == 0) return;
    warn(i, "%zu edges turn by 31 to 60 degrees and go on alike, as a coarse tube's do; they count as edges of the shape, but if they stand "
            "for a curve, the facets stand off it by up to %s", i->fitness.n_unsure_edges, rg_length_words(&off, i->fitness.unsure_sagitta_m));
}

static void pass_verdict(rg_inspection *i)
{
    const rg_fitness *f = &i->fitness;
    const char *const part = rg_mesh_part_name(i->mesh, f->worst_part);
    rg_words most, freq, off, limit, edge;
    rg_frequency_words(&most, f->fit_up_to_hz), rg_frequency_words(&freq, i->freq_hz), rg_length_words(&off, f->sagitta_m[2]);
    rg_length_words(&limit, LIMIT_PER_LAMBDA * f->wavelength_m), rg_length_words(&edge, f->edge_needed_m);
    if (isinf(f->fit_up_to_hz))
        snprintf(i->verdict, sizeof i->verdict, "flat facets only: no limit from tessellation");
    else if (i->freq_hz > 0.0 && !f->fit)
        snprintf(i->verdict, sizeof i->verdict, "not fit for %s: the facets of \"%s\" stand off the smooth surface by up to %s, and lambda/16 "
                 "is %s; tessellate with edges under %s there", freq.text, part, off.text, limit.text, edge.text);
    else
        snprintf(i->verdict, sizeof i->verdict, "fit up to %s: the facets of \"%s\" stand off the smooth surface by up to %s", most.text, part,
                 off.text);
}

rg_status rg_inspect(rg_inspection *out, const char *path, const rg_mesh *mesh, double freq_hz, rg_error *err)
{
    rg_inspection i = {.path = path, .mesh = mesh, .freq_hz = freq_hz};
    rg_status status = rg_mesh_fitness(mesh, freq_hz != 0.0 ? freq_hz : 1.0, &i.fitness, err);
    if (status) return status;
    i.part_sagitta_m = malloc(rg_mesh_n_parts(mesh) * sizeof *i.part_sagitta_m);
    status = i.part_sagitta_m ? rg_mesh_part_sagitta(mesh, i.part_sagitta_m, err) : rg_fail(err, RG_NO_MEMORY, "no memory for the parts");
    if (status) {
        rg_inspection_free(&i);
        return status;
    }
    const rg_mesh_report *r = rg_mesh_get_report(mesh);
    warn_of_size(&i, r);
    warn_of_step(&i, r);
    warn_of_unsure(&i);
    pass_verdict(&i);
    *out = i;
    return RG_OK;
}

void rg_inspection_free(rg_inspection *inspection)
{
    free(inspection->part_sagitta_m);
    inspection->part_sagitta_m = NULL;
}

static void print_mesh(FILE *out, const rg_inspection *i, const rg_mesh_report *r)
{
    rg_words size[3];
    size_words(size, r);
    fprintf(out, "file          %s\n", i->path);
    fprintf(out, "format        %s; %s\n", r->format, r->assumed);
    fprintf(out, "size          %s long (x), %s wide (y), %s high (z)\n", size[0].text, size[1].text, size[2].text);
    fprintf(out, "box           x %.6g to %.6g, y %.6g to %.6g, z %.6g to %.6g m\n", r->low_m[0] + 0.0, r->high_m[0] + 0.0, r->low_m[1] + 0.0,
            r->high_m[1] + 0.0, r->low_m[2] + 0.0, r->high_m[2] + 0.0);
    fprintf(out, "facets        %zu, with %zu vertices, %.4g m2\n", rg_mesh_n_facets(i->mesh), rg_mesh_n_vertices(i->mesh), r->area_m2);
    fprintf(out, "shells        %zu: %zu closed, %zu open\n", r->n_shells, r->n_closed_shells, r->n_shells - r->n_closed_shells);
    fprintf(out, "file sha256   %s\n", r->sha256);
    fprintf(out, "mesh sha256   %s\n", r->geometry_sha256);
}

static void print_repairs(FILE *out, const rg_mesh_report *r)
{
    rg_words weld, step;
    rg_length_words(&weld, r->weld_m), rg_length_words(&step, r->coordinate_step_m);
    if (r->coordinate_step_m < 1e-9) strcpy(step.text, "under 1 nm");
    fprintf(out, "\nread and repaired\n");
    fprintf(out, "%12zu  facets read\n", r->n_facets_read);
    fprintf(out, "%12zu  faces of more than three corners cut\n", r->n_polygons_cut);
    fprintf(out, "%12zu  points, lines and faces without area left out\n", r->n_not_facets);
    fprintf(out, "%12zu  vertices welded, nearer than %s to another\n", r->n_vertices_welded, weld.text);
    fprintf(out, "%12zu  facets dropped, lower than %s\n", r->n_degenerate, weld.text);
    fprintf(out, "%12zu  facets dropped, there already\n", r->n_duplicate);
    fprintf(out, "%12zu  facets turned, wound against their shell\n", r->n_facets_turned);
    fprintf(out, "%12zu  closed shells turned, inside out\n", r->n_shells_turned);
    fprintf(out, "%12zu  edges with one facet\n", r->n_boundary_edges);
    fprintf(out, "%12zu  edges with three facets or more\n", r->n_branch_edges);
    fprintf(out, "%12s  between the file's numbers at its farthest coordinate\n", step.text);
}

static void print_parts(FILE *out, const rg_inspection *i)
{
    fprintf(out, "\nparts\n      facets     area m2  stands off  name\n");
    for (size_t p = 0; p < rg_mesh_n_parts(i->mesh); p++) {
        rg_words off;
        fprintf(out, "%12zu%12.4g%12s  %s\n", rg_mesh_part_n_facets(i->mesh, p), rg_mesh_part_area_m2(i->mesh, p),
                i->part_sagitta_m[p] > 0.0 ? rg_length_words(&off, i->part_sagitta_m[p]) : "flat", rg_mesh_part_name(i->mesh, p));
    }
}

static void print_fitness(FILE *out, const rg_inspection *i, const rg_mesh_report *r)
{
    static const char *const point[5] = {"5 %", "25 %", "50 %", "75 %", "95 %"};
    const rg_fitness *f = &i->fitness;
    rg_words a, b, c;
    fprintf(out, "\ntessellation\nedges         ");
    for (int p = 0; p < 5; p++) fprintf(out, "%s%s at %s", p ? ", " : "", rg_length_words(&a, f->edge_m[p]), point[p]);
    fprintf(out, "\nfeatures      %zu edges left out: turns above 31 degrees, or above 10 and alone\n", f->n_feature_edges);
    if (f->curved_area_m2 > 0.0)
        fprintf(out, "curved        %.4g of %.4g m2; stands off by %s at 50 %%, %s at 95 %%, at most %s\n", f->curved_area_m2, r->area_m2,
                rg_length_words(&a, f->sagitta_m[0]), rg_length_words(&b, f->sagitta_m[1]), rg_length_words(&c, f->sagitta_m[2]));
    if (i->freq_hz > 0.0) {
        fprintf(out, "\nat %s, wavelength %s\nedges         ", rg_frequency_words(&a, i->freq_hz), rg_length_words(&b, f->wavelength_m));
        for (int p = 0; p < 5; p++) fprintf(out, "%s%.3g at %s", p ? ", " : "", f->edge_m[p] / f->wavelength_m, point[p]);
        fprintf(out, ", in wavelengths\n");
        if (f->curved_area_m2 > 0.0)
            fprintf(out, "coarse        %.3g %% of the curved area stands off by more than lambda/16\n", 100.0 * f->over_area_m2 / f->curved_area_m2);
        fprintf(out, "far field     from %s on (2 D^2/lambda, D = %s)\n", rg_length_words(&a, f->far_field_m), rg_length_words(&b, f->size_m));
        fprintf(out, "aspect step   %.3g deg or less, half of lambda/(2 D)\n", f->aspect_step_rad * DEG_PER_RAD);
    }
}

rg_status rg_inspection_print(FILE *out, const rg_inspection *inspection, rg_error *err)
{
    const rg_mesh_report *r = rg_mesh_get_report(inspection->mesh);
    print_mesh(out, inspection, r);
    print_repairs(out, r);
    print_parts(out, inspection);
    print_fitness(out, inspection, r);
    fprintf(out, "\n");
    for (size_t w = 0; w < inspection->n_warnings; w++) fprintf(out, "warning: %s\n", inspection->warning[w]);
    fprintf(out, "%s\n", inspection->verdict);
    return fflush(out) || ferror(out) ? rg_fail(err, RG_SYSTEM, "the report cannot be written: %s", strerror(errno)) : RG_OK;
}
