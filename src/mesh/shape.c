/* shape.c - canonical targets: what each kind is made of, and whether what is asked for can be built */
#include "base/elementary.h"
#include "mesh/patch.h"
#include "mesh/repair.h"
#include "mesh/shapes.h"
#include <stdio.h>
#include <string.h>

#define FACETS_MAX 100e6
#define SIZE_MIN_M 1e-6
#define SIZE_MAX_M 1e4

static rg_status add_part(rg_soup *soup, uint32_t *part, const char *name, rg_error *err)
{
    return rg_soup_part(soup, part, name, strlen(name), err);
}

/* A flat piece: corner + u along + v up. */
typedef struct { vec3 corner, along, up; } flat;

static vec3 point_of_flat(const void *of, double u, double v)
{
    const flat *f = of;
    return vec3_add(f->corner, vec3_add(vec3_scale(f->along, u), vec3_scale(f->up, v)));
}

static rg_status flat_part(rg_soup *soup, const char *name, rg_cells cells, vec3 corner, vec3 along, vec3 up, rg_error *err)
{
    uint32_t part;
    const flat f = {corner, along, up};
    const rg_status status = add_part(soup, &part, name, err);
    return status ? status : rg_patch_grid(soup, part, (size_t)cells.n_u, (size_t)cells.n_v, point_of_flat, &f, err);
}

/* --- plate and dihedral --- */

static double plate_count(const rg_shape *shape)
{
    const rg_cells cells = rg_cells_of(shape->size_m[0], shape->size_m[1], shape->edge_m);
    return 2.0 * cells.n_u * cells.n_v;
}

static rg_status plate_build(rg_soup *soup, const rg_shape *shape, rg_error *err)
{
    const double w = shape->size_m[0], h = shape->size_m[1];
    return flat_part(soup, "plate", rg_cells_of(w, h, shape->edge_m), (vec3){0.0, -0.5 * w, -0.5 * h}, (vec3){0.0, w, 0.0},
                     (vec3){0.0, 0.0, h}, err);
}

static double dihedral_count(const rg_shape *shape) { return 2.0 * plate_count(shape); }

static rg_status dihedral_build(rg_soup *soup, const rg_shape *shape, rg_error *err)
{
    const double a = shape->size_m[0] * sqrt(0.5), b = shape->size_m[1];
    const rg_cells cells = rg_cells_of(shape->size_m[0], b, shape->edge_m), turned = {cells.n_v, cells.n_u};
    const vec3 foot = {0.0, 0.0, -0.5 * b}, up = {0.0, 0.0, b};
    const rg_status status = flat_part(soup, "left", cells, foot, (vec3){a, a, 0.0}, up, err);
    return status ? status : flat_part(soup, "right", turned, foot, up, (vec3){a, -a, 0.0}, err);
}

/* --- discs, and shapes that have some --- */

/* What a plane through the axis z cuts out of a cylinder or a cone: the polygon's radii, not the circle's. */
typedef struct {
    double n_around, n_rows, base_m, top_m, low_m, high_m;
} frustum;

/* An edge shorter than this part of the radius makes rings; up to it a fan will do, whose polygon reaches 5.4 % out at the most. */
#define FAN_REACH 0.9

static double chord_for(double edge_m) { return edge_m * sqrt(0.5); }    /* the other side of a cell, as long, makes the diagonal edge_m */

static rg_disc_plan cut_disc(double n_rim, double radius_m, double edge_m)
{
    if (edge_m == 0.0 || radius_m <= edge_m) return (rg_disc_plan){(size_t)n_rim, 1, 1.0};
    return (rg_disc_plan){(size_t)n_rim, (size_t)rg_pieces(radius_m, chord_for(edge_m)), chord_for(edge_m) / radius_m};
}

static double disc_facets(double n_rim, double radius_m, double edge_m)     /* of a quarter */
{
    const bool fan = edge_m == 0.0 || radius_m <= edge_m;
    return fan ? 0.25 * n_rim : rg_disc_n_facets(n_rim, rg_pieces(radius_m, chord_for(edge_m)), chord_for(edge_m) / radius_m);
}

static rg_circle rim_of(double radius_m, const rg_shape *shape)
{
    const double edge_m = shape->edge_m;
    return rg_circle_of(radius_m, shape->sagitta_m, edge_m > 0.0 && FAN_REACH * edge_m < radius_m ? chord_for(edge_m) : edge_m);
}

static rg_status disc_part(rg_soup *soup, const char *name, int n_quarters, double n_rim, double radius_m, double edge_m, const flat *at,
                           rg_error *err)
{
    uint32_t part;
    const rg_disc_plan plan = cut_disc(n_rim, radius_m, edge_m);
    const rg_status status = add_part(soup, &part, name, err);
    return status ? status : rg_patch_disc(soup, part, 0, n_quarters, &plan, point_of_flat, at, err);
}

static double disc_count(const rg_shape *shape)
{
    const rg_circle rim = rim_of(shape->size_m[0], shape);
    return 4.0 * disc_facets(rim.n, rim.radius_m, shape->edge_m);
}

static rg_status disc_build(rg_soup *soup, const rg_shape *shape, rg_error *err)
{
    const rg_circle rim = rim_of(shape->size_m[0], shape);
    const flat at = {.along = {0.0, rim.radius_m, 0.0}, .up = {0.0, 0.0, rim.radius_m}};
    return disc_part(soup, "disc", 4, rim.n, rim.radius_m, shape->edge_m, &at, err);
}

static frustum frustum_of(const rg_shape *shape)
{
    const double *size = shape->size_m;
    const bool cone = shape->kind == RG_CONE;
    const double base_m = size[0], top_m = cone ? size[1] : size[0], height_m = cone ? size[2] : size[1], wide_m = fmax(base_m, top_m);
    const rg_circle rim = rg_circle_of(wide_m, shape->sagitta_m, chord_for(shape->edge_m));
    frustum f = {.n_around = rim.n, .n_rows = 1.0, .low_m = cone ? 0.0 : -0.5 * height_m, .high_m = cone ? height_m : 0.5 * height_m};
    f.base_m = base_m / wide_m * rim.radius_m;
    f.top_m = top_m / wide_m * rim.radius_m;
    if (shape->edge_m > 0.0) {
        double c, s;
        rg_cis_pi(1.0 / f.n_around, &c, &s);
        const double chord_m = 2.0 * rim.radius_m * s, slant_m = sqrt(height_m * height_m + (f.base_m - f.top_m) * (f.base_m - f.top_m));
        f.n_rows = rg_pieces(slant_m, sqrt(shape->edge_m * shape->edge_m - chord_m * chord_m));
    }
    return f;
}

static vec3 point_of_side(const void *of, double u, double v)
{
    const frustum *f = of;
    double c, s;
    rg_cis_pi(2.0 * u, &c, &s);
    const double r = f->base_m + (f->top_m - f->base_m) * v;
    return (vec3){r * c, r * s, f->low_m + (f->high_m - f->low_m) * v};
}

static double frustum_count(const rg_shape *shape)
{
    const frustum f = frustum_of(shape);
    double n = 2.0 * f.n_around * f.n_rows + 4.0 * disc_facets(f.n_around, f.base_m, shape->edge_m);
    if (f.top_m > 0.0) n += 4.0 * disc_facets(f.n_around, f.top_m, shape->edge_m);
    return n;
}

/* The last row runs into the tip: triangles alone. */
static rg_status tip(rg_soup *soup, uint32_t part, const frustum *f, rg_error *err)
{
    const size_t n = (size_t)f->n_around;
    const uint32_t base = (uint32_t)soup->n_vertices;
    const double row = (f->n_rows - 1.0) / f->n_rows;
    rg_status status = rg_soup_vertex(soup, 0.0, 0.0, f->high_m, err);
    for (size_t i = 0; i < n && !status; i++) {
        const vec3 r = point_of_side(f, (double)i / f->n_around, row);
        status = rg_soup_vertex(soup, r.x, r.y, r.z, err);
    }
    for (size_t i = 0; i < n && !status; i++)
        status = rg_soup_facet(soup, base + 1 + (uint32_t)i, base + 1 + (uint32_t)((i + 1) % n), base, part, err);
    return status;
}

static vec3 point_of_rows(const void *of, double u, double v)     /* all rows but the last */
{
    const frustum *f = of;
    return point_of_side(f, u, v * (f->n_rows - 1.0) / f->n_rows);
}

static rg_status frustum_build(rg_soup *soup, const rg_shape *shape, rg_error *err)
{
    const frustum f = frustum_of(shape);
    const size_t n = (size_t)f.n_around, rows = (size_t)f.n_rows;
    const bool cone = shape->kind == RG_CONE, pointed = f.top_m == 0.0;
    const flat below = {{0.0, 0.0, f.low_m}, {0.0, f.base_m, 0.0}, {f.base_m, 0.0, 0.0}};
    const flat above = {{0.0, 0.0, f.high_m}, {f.top_m, 0.0, 0.0}, {0.0, f.top_m, 0.0}};
    uint32_t side;
    rg_status status = add_part(soup, &side, "side", err);
    if (!status && !pointed) status = rg_patch_grid(soup, side, n, rows, point_of_side, &f, err);
    if (!status && pointed && rows > 1) status = rg_patch_grid(soup, side, n, rows - 1, point_of_rows, &f, err);
    if (!status && pointed) status = tip(soup, side, &f, err);
    if (!status && cone) status = disc_part(soup, "base", 4, f.n_around, f.base_m, shape->edge_m, &below, err);
    if (!status && !pointed) status = disc_part(soup, "top", 4, f.n_around, f.top_m, shape->edge_m, &above, err);
    if (!status && !cone) status = disc_part(soup, "bottom", 4, f.n_around, f.base_m, shape->edge_m, &below, err);
    return status;
}

/* --- trihedrals: one face is cut three times, so that the cuts of two faces meet on their common axis --- */

static double trihedral_cuts(const rg_shape *shape) { return rg_pieces(shape->size_m[0] * sqrt(2.0), shape->edge_m); }

static double trihedral_count(const rg_shape *shape)
{
    const double n = trihedral_cuts(shape);
    if (shape->kind != RG_TRIHEDRAL_CIRCULAR) return (shape->kind == RG_TRIHEDRAL ? 3.0 : 6.0) * n * n;
    const rg_circle rim = rim_of(shape->size_m[0], shape);
    return 3.0 * disc_facets(rim.n, rim.radius_m, shape->edge_m);
}

static rg_status trihedral_build(rg_soup *soup, const rg_shape *shape, rg_error *err)
{
    static const char *const name[] = {"xy", "yz", "zx"};
    const bool round = shape->kind == RG_TRIHEDRAL_CIRCULAR;
    const rg_circle rim = rim_of(shape->size_m[0], shape);
    const double leg_m = round ? rim.radius_m : shape->size_m[0];
    const size_t n = round ? 1 : (size_t)trihedral_cuts(shape);
    const vec3 axis[] = {{leg_m, 0.0, 0.0}, {0.0, leg_m, 0.0}, {0.0, 0.0, leg_m}};
    rg_status status = RG_OK;
    for (int i = 0; i < 3 && !status; i++) {
        const flat face = {.along = axis[i], .up = axis[(i + 1) % 3]};
        uint32_t part;
        if (round) {
            status = disc_part(soup, name[i], 1, rim.n, leg_m, shape->edge_m, &face, err);
            continue;
        }
        status = add_part(soup, &part, name[i], err);
        if (status) break;
        if (shape->kind == RG_TRIHEDRAL) status = rg_patch_triangle(soup, part, n, point_of_flat, &face, err);
        else status = rg_patch_grid(soup, part, n, n, point_of_flat, &face, err);
    }
    return status;
}

/* --- all kinds --- */

typedef struct {
    const char *name, *size_name[3];
    bool curved, may_be_zero[3];
    rg_shape_count *count;
    rg_shape_build *build;
} kind_of_shape;

static const kind_of_shape kinds[] = {
    [RG_PLATE] = {"plate", {"width", "height"}, false, {false}, plate_count, plate_build},
    [RG_DISC] = {"disc", {"radius"}, true, {false}, disc_count, disc_build},
    [RG_SPHERE] = {"sphere", {"radius"}, true, {false}, rg_sphere_count, rg_sphere_build},
    [RG_CYLINDER] = {"cylinder", {"radius", "length"}, true, {false}, frustum_count, frustum_build},
    [RG_CONE] = {"cone", {"base radius", "top radius", "height"}, true, {false, true, false}, frustum_count, frustum_build},
    [RG_DIHEDRAL] = {"dihedral", {"face width", "face height"}, false, {false}, dihedral_count, dihedral_build},
    [RG_TRIHEDRAL] = {"triangular trihedral", {"leg"}, false, {false}, trihedral_count, trihedral_build},
    [RG_TRIHEDRAL_SQUARE] = {"square trihedral", {"leg"}, false, {false}, trihedral_count, trihedral_build},
    [RG_TRIHEDRAL_CIRCULAR] = {"circular trihedral", {"leg"}, true, {false}, trihedral_count, trihedral_build},
    [RG_GUARDRAIL] = {"guardrail", {"length"}, true, {false}, rg_guardrail_count, rg_guardrail_build},
};

static rg_status check_limit(const char *name, const char *option, double value_m, rg_error *err)
{
    if (isfinite(value_m) && value_m >= 0.0) return RG_OK;
    return rg_fail(err, RG_BAD_VALUE, "the %s is %g m: write a positive length, such as %s (0: not limited)", name, value_m, option);
}

static rg_status check_shape(const rg_shape *shape, const kind_of_shape *kind, rg_error *err)
{
    for (int i = 0; i < 3 && kind->size_name[i]; i++) {
        const double size_m = shape->size_m[i];
        if (size_m == 0.0 && kind->may_be_zero[i]) continue;
        if (!isfinite(size_m) || size_m < SIZE_MIN_M || size_m > SIZE_MAX_M)
            return rg_fail(err, RG_BAD_VALUE, "the %s's %s is %g m: write a length from a micrometre to 10 km%s, such as 0.1m", kind->name,
                           kind->size_name[i], size_m, kind->may_be_zero[i] ? ", or 0 for a tip" : "");
    }
    if (shape->kind == RG_GUARDRAIL && shape->size_m[0] < RG_GUARDRAIL_SHORTEST_M)
        return rg_fail(err, RG_BAD_VALUE, "a guardrail of %g m is too short for a post: at least %g m; one piece is 3.81 m", shape->size_m[0],
                       RG_GUARDRAIL_SHORTEST_M);
    rg_status status = check_limit("sagitta", "--sagitta 0.06mm", shape->sagitta_m, err);
    if (!status) status = check_limit("edge", "--edge 10mm", shape->edge_m, err);
    if (!status && kind->curved && shape->sagitta_m == 0.0 && shape->edge_m == 0.0)
        status = rg_fail(err, RG_BAD_VALUE, "a %s is curved and must be told how fine to be: --sagitta 0.06mm is lambda/64 at 77 GHz", kind->name);
    return status;
}

/* The smallest of value_m, 1.25 value_m, ... that leaves the shape few enough facets, or 0. */
static double coarse_enough(const rg_shape *shape, const kind_of_shape *kind, bool is_edge)
{
    rg_shape coarse = *shape;
    double *value_m = is_edge ? &coarse.edge_m : &coarse.sagitta_m;
    while (*value_m > 0.0 && *value_m <= SIZE_MAX_M) {
        if (kind->count(&coarse) <= FACETS_MAX) return *value_m;
        *value_m *= 1.25;
    }
    return 0.0;
}

static rg_status check_count(const rg_shape *shape, const kind_of_shape *kind, rg_error *err)
{
    const double n = kind->count(shape);
    if (n <= FACETS_MAX) return RG_OK;
    double sagitta_m = kind->curved ? coarse_enough(shape, kind, false) : 0.0, edge_m = 0.0;
    if (sagitta_m == 0.0) edge_m = coarse_enough(shape, kind, true);
    if (sagitta_m == 0.0 && edge_m == 0.0) {    /* both are too fine: each as if the other were not there */
        rg_shape alone = *shape;
        alone.edge_m = 0.0;
        sagitta_m = coarse_enough(&alone, kind, false);
        alone = *shape;
        alone.sagitta_m = 0.0;
        edge_m = 1.25 * coarse_enough(&alone, kind, true);
    }
    /* 3 % more, so that two digits are enough */
    char sagitta[48] = "", edge[48] = "";
    if (sagitta_m > 0.0) snprintf(sagitta, sizeof sagitta, " --sagitta %.2gmm", 1.03e3 * sagitta_m);
    if (edge_m > 0.0) snprintf(edge, sizeof edge, " --edge %.2gmm", 1.03e3 * edge_m);
    return rg_fail(err, RG_BAD_VALUE, "that %s would have about %.3g facets, more than 100 million: take%s%s or coarser", kind->name, n,
                   sagitta, edge);
}

static rg_status too_fine(const kind_of_shape *kind, rg_error *err)
{
    return rg_fail(err, RG_BAD_VALUE, "some facets of that %s would be lower than 2^-20 of its largest extent, where corners are taken for "
                   "one: make its sizes less unlike, or the sagitta or edge coarser", kind->name);
}

rg_status rg_shape_mesh(rg_mesh **out, const rg_shape *shape, rg_error *err)
{
    if ((size_t)shape->kind >= sizeof kinds / sizeof kinds[0])
        return rg_fail(err, RG_BAD_VALUE, "%d is no kind of shape", (int)shape->kind);
    const kind_of_shape *kind = &kinds[shape->kind];
    const rg_turn as_is = {1.0, {0, 1, 2}, {1.0, 1.0, 1.0}};
    const rg_mesh_report report = {.format = "shape", .assumed = "metres, x to the front, z up"};
    rg_mesh *mesh = NULL;
    rg_soup soup = {0};
    rg_status status = check_shape(shape, kind, err);
    if (!status) status = check_count(shape, kind, err);
    if (!status) status = kind->build(&soup, shape, err);
    double largest_m = 0.0;
    for (size_t v = 0; v < soup.n_vertices; v++)
        for (int i = 0; i < 3; i++) largest_m = fmax(largest_m, fabs(soup.vertex[v][i]));
    rg_soup_note_step(&soup, largest_m, false);
    if (!status) status = rg_mesh_build(&mesh, &soup, &as_is, &report, err);
    if (status == RG_BAD_INPUT || (!status && mesh->report.n_degenerate + mesh->report.n_duplicate > 0)) status = too_fine(kind, err);
    if (!status) {
        *out = mesh;
        mesh = NULL;
    }
    rg_mesh_free(mesh);
    rg_soup_free(&soup);
    return status;
}
