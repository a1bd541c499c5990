/* mesh.c - from loose facets to a mesh, and what may be asked of it */
#include "base/digest.h"
#include "base/sum.h"
#include "base/vec3.h"
#include "mesh/repair.h"
#include <stdlib.h>
#include <string.h>

#define WELD_FRACTION 0x1p-20       /* of the largest extent */
#define LARGEST_M 1e5
#define SMALLEST_M 1e-6

typedef struct { double low[3], high[3]; } box;

/* Of the vertices that facets use. Marks them, for a stray point must not move the mesh's middle. */
static rg_status box_of_used(box *out, const rg_soup *soup, rg_error *err)
{
    unsigned char *used = calloc(soup->n_vertices ? soup->n_vertices : 1, 1);
    if (!used) return rg_fail(err, RG_NO_MEMORY, "no memory for %zu vertices", soup->n_vertices);
    for (size_t f = 0; f < soup->n_facets; f++)
        for (int i = 0; i < 3; i++) used[soup->facet[f][i]] = 1;
    rg_status status = RG_OK;
    *out = (box){{INFINITY, INFINITY, INFINITY}, {-INFINITY, -INFINITY, -INFINITY}};
    for (size_t v = 0; v < soup->n_vertices && !status; v++) {
        if (!used[v]) continue;
        const double *r = soup->vertex[v];
        if (!isfinite(r[0]) || !isfinite(r[1]) || !isfinite(r[2]))
            status = rg_fail(err, RG_BAD_INPUT, "vertex %zu is (%g, %g, %g): coordinates must be finite", v + 1, r[0], r[1], r[2]);
        for (int i = 0; i < 3; i++) {
            out->low[i] = fmin(out->low[i], r[i]);
            out->high[i] = fmax(out->high[i], r[i]);
        }
    }
    free(used);
    return status;
}

static double largest_extent(const box *b)
{
    return fmax(b->high[0] - b->low[0], fmax(b->high[1] - b->low[1], b->high[2] - b->low[2]));
}

static rg_status check_size(double extent_m, double unit_m, rg_error *err)
{
    if (extent_m > LARGEST_M)
        return rg_fail(err, RG_BAD_INPUT, "the mesh is %.3g m large with %g m a unit; at most 100 km: is its unit mm (--units mm)?",
                       extent_m, unit_m);
    if (extent_m < SMALLEST_M)
        return rg_fail(err, RG_BAD_INPUT, "the mesh is only %.3g m large with %g m a unit; at least a micrometre: is its unit larger "
                       "(--units)?", extent_m, unit_m);
    return RG_OK;
}

/* Subtracts the middle first, in the file's own numbers: what is left then keeps its digits even 4000 km from zero. */
static void recentre(rg_mesh *mesh, const box *b, const rg_turn *turn)
{
    double middle[3];
    for (int i = 0; i < 3; i++) {
        middle[i] = b->low[turn->axis[i]] + 0.5 * (b->high[turn->axis[i]] - b->low[turn->axis[i]]);
        mesh->origin_m[i] = middle[i] * turn->sign[i] * turn->unit_m + 0.0;     /* + 0.0 makes a +0 of -0, for the digest */
    }
    for (size_t v = 0; v < mesh->n_vertices; v++) {
        double *r = mesh->vertex_m[v], turned[3];
        for (int i = 0; i < 3; i++) turned[i] = (r[turn->axis[i]] - middle[i]) * turn->sign[i] * turn->unit_m + 0.0;
        memcpy(r, turned, sizeof turned);
    }
}

/* Packs the vertices so that none is left without a facet; keeps their order. */
static rg_status drop_unused(rg_mesh *mesh, rg_error *err)
{
    uint32_t *became = malloc((mesh->n_vertices ? mesh->n_vertices : 1) * sizeof *became);
    if (!became) return rg_fail(err, RG_NO_MEMORY, "no memory for %zu vertices", mesh->n_vertices);
    memset(became, 0xff, mesh->n_vertices * sizeof *became);
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) became[mesh->facet[f][i]] = 0;
    size_t n = 0;
    for (size_t v = 0; v < mesh->n_vertices; v++) {
        if (became[v] == UINT32_MAX) continue;
        became[v] = (uint32_t)n;
        memmove(mesh->vertex_m[n++], mesh->vertex_m[v], sizeof mesh->vertex_m[v]);
    }
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) mesh->facet[f][i] = became[mesh->facet[f][i]];
    mesh->n_vertices = n;
    free(became);
    return RG_OK;
}

static void shrink(void *array_at, size_t bytes)
{
    void *old, *small;
    memcpy(&old, array_at, sizeof old);
    small = realloc(old, bytes ? bytes : 1);
    if (small) memcpy(array_at, &small, sizeof small);
}

/* A stable counting sort; also fills part_first. */
static rg_status sort_by_part(rg_mesh *mesh, rg_error *err)
{
    mesh->part_first = calloc(mesh->n_parts + 2, sizeof *mesh->part_first);
    if (!mesh->part_first) goto no_memory;
    size_t *const next = mesh->part_first + 1;      /* while filling, next[p] runs from p's first facet to its end */
    bool sorted = true;
    for (size_t f = 0; f < mesh->n_facets; f++) {
        next[mesh->part[f] + 1]++;
        sorted = sorted && (f == 0 || mesh->part[f - 1] <= mesh->part[f]);
    }
    for (size_t p = 0; p < mesh->n_parts; p++) next[p + 1] += next[p];
    uint32_t (*facet)[3] = sorted ? NULL : malloc(mesh->n_facets * sizeof *facet);
    if (!sorted && !facet) goto no_memory;
    for (size_t f = 0; f < mesh->n_facets; f++) {
        const size_t to = next[mesh->part[f]]++;
        if (!sorted) memcpy(facet[to], mesh->facet[f], sizeof facet[to]);
    }
    if (sorted) return RG_OK;
    free(mesh->facet);
    mesh->facet = facet;
    for (size_t p = 0; p < mesh->n_parts; p++)
        for (size_t f = mesh->part_first[p]; f < mesh->part_first[p + 1]; f++) mesh->part[f] = (uint32_t)p;
    return RG_OK;
no_memory:
    return rg_fail(err, RG_NO_MEMORY, "no memory to sort %zu facets by part", mesh->n_facets);
}

static vec3 twice_area(const rg_mesh *mesh, size_t f)
{
    const uint32_t *c = mesh->facet[f];
    const vec3 a = vec3_from(mesh->vertex_m[c[0]]);
    return vec3_cross(vec3_sub(vec3_from(mesh->vertex_m[c[1]]), a), vec3_sub(vec3_from(mesh->vertex_m[c[2]]), a));
}

static rg_status measure(rg_mesh *mesh, rg_error *err)
{
    rg_mesh_report *report = &mesh->report;
    rg_sum area_m2 = {0};
    for (size_t f = 0; f < mesh->n_facets; f++) rg_sum_add(&area_m2, 0.5 * vec3_norm(twice_area(mesh, f)));
    report->area_m2 = rg_sum_value(&area_m2);
    for (int i = 0; i < 3; i++) {
        double low_m = INFINITY, high_m = -INFINITY;
        for (size_t v = 0; v < mesh->n_vertices; v++) {
            low_m = fmin(low_m, mesh->vertex_m[v][i]);
            high_m = fmax(high_m, mesh->vertex_m[v][i]);
        }
        report->low_m[i] = mesh->origin_m[i] + low_m;
        report->high_m[i] = mesh->origin_m[i] + high_m;
    }
    rg_digest *digest = rg_digest_new();
    if (!digest) return rg_fail(err, RG_NO_MEMORY, "no memory for the mesh's digest");
    const uint64_t n[] = {mesh->n_vertices, mesh->n_facets, mesh->n_parts};
    rg_digest_add(digest, n, sizeof n);
    rg_digest_add(digest, mesh->origin_m, sizeof mesh->origin_m);
    rg_digest_add(digest, mesh->vertex_m, mesh->n_vertices * sizeof *mesh->vertex_m);
    rg_digest_add(digest, mesh->facet, mesh->n_facets * sizeof *mesh->facet);
    rg_digest_add(digest, mesh->part, mesh->n_facets * sizeof *mesh->part);
    for (size_t p = 0; p < mesh->n_parts; p++) rg_digest_add(digest, mesh->part_name[p], strlen(mesh->part_name[p]) + 1);
    rg_digest_end(digest, report->geometry_sha256);
    return RG_OK;
}

static void take_arrays(rg_mesh *mesh, rg_soup *soup)
{
    mesh->n_vertices = soup->n_vertices;
    mesh->n_facets = soup->n_facets;
    mesh->n_parts = soup->n_parts;
    mesh->vertex_m = soup->vertex;
    mesh->facet = soup->facet;
    mesh->part = soup->part;
    mesh->part_name = soup->part_name;
    mesh->report.n_facets_read = soup->n_facets;
    mesh->report.n_polygons_cut = soup->n_polygons_cut;
    mesh->report.n_not_facets = soup->n_not_facets;
    soup->n_parts = 0;
    soup->vertex = NULL, soup->facet = NULL, soup->part = NULL, soup->part_name = NULL;
}

static rg_status repair(rg_mesh *mesh, rg_error *err)
{
    rg_mesh_report *report = &mesh->report;
    rg_status status = drop_unused(mesh, err);      /* first, for a stray point may lie anywhere */
    if (status) return status;
    const size_t n_read = mesh->n_vertices;
    status = rg_weld(&mesh->n_vertices, mesh->vertex_m, mesh->n_facets, mesh->facet, report->weld_m, err);
    if (status) return status;
    report->n_vertices_welded = n_read - mesh->n_vertices;
    shrink(&mesh->vertex_m, mesh->n_vertices * sizeof *mesh->vertex_m);
    status = rg_drop_facets(&mesh->n_facets, mesh->facet, mesh->part, (const double (*)[3])mesh->vertex_m, report->weld_m,
                            &report->n_degenerate, &report->n_duplicate, err);
    if (!status && mesh->n_facets == 0)
        status = rg_fail(err, RG_BAD_INPUT, "no facet is left: all %zu are lower than %.3g m or have two corners in one place",
                         report->n_facets_read, report->weld_m);
    if (!status) status = drop_unused(mesh, err);
    if (status) return status;
    shrink(&mesh->vertex_m, mesh->n_vertices * sizeof *mesh->vertex_m);
    shrink(&mesh->facet, mesh->n_facets * sizeof *mesh->facet);
    shrink(&mesh->part, mesh->n_facets * sizeof *mesh->part);
    status = sort_by_part(mesh, err);
    if (!status) status = rg_find_shells(mesh, err);
    return status ? status : measure(mesh, err);
}

rg_status rg_mesh_build(rg_mesh **out, rg_soup *soup, const rg_turn *turn, const rg_mesh_report *report, rg_error *err)
{
    rg_mesh *mesh = NULL;
    box b;
    rg_status status = soup->n_facets ? box_of_used(&b, soup, err) :
        rg_fail(err, RG_BAD_INPUT, soup->n_not_facets ? "no triangle in it, only points, lines or faces without extent" : "no triangle in it");
    if (!status) status = check_size(largest_extent(&b) * turn->unit_m, turn->unit_m, err);
    if (status) goto done;
    mesh = calloc(1, sizeof *mesh);
    status = mesh ? RG_OK : rg_fail(err, RG_NO_MEMORY, "no memory for %zu facets", soup->n_facets);
    if (status) goto done;
    mesh->report = *report;
    mesh->report.unit_m = turn->unit_m;
    mesh->report.weld_m = largest_extent(&b) * turn->unit_m * WELD_FRACTION;
    mesh->report.coordinate_step_m = soup->coordinate_step * turn->unit_m;
    take_arrays(mesh, soup);
    rg_soup_free(soup);
    recentre(mesh, &b, turn);
    status = repair(mesh, err);
    if (status) goto done;
    *out = mesh;
    mesh = NULL;
done:
    rg_mesh_free(mesh);
    rg_soup_free(soup);
    return status;
}

static rg_status copy_arrays(rg_soup *soup, size_t n_vertices, const double vertex_m[][3], size_t n_facets, const uint32_t facet[][3],
                             const uint32_t part[], size_t n_parts, rg_error *err)
{
    rg_status status = rg_soup_reserve(soup, n_vertices, n_facets, err);
    double largest = 0.0;
    for (size_t v = 0; v < n_vertices && !status; v++) {
        status = rg_soup_vertex(soup, vertex_m[v][0], vertex_m[v][1], vertex_m[v][2], err);
        for (int i = 0; i < 3; i++) largest = fmax(largest, fabs(vertex_m[v][i]));
    }
    rg_soup_note_step(soup, largest, false);
    for (size_t f = 0; f < n_facets && !status; f++) {
        const uint32_t *c = facet[f], p = part ? part[f] : 0;
        if (c[0] >= n_vertices || c[1] >= n_vertices || c[2] >= n_vertices)
            status = rg_fail(err, RG_BAD_INPUT, "facet %zu has corners %u, %u, %u of %zu vertices", f, c[0], c[1], c[2], n_vertices);
        else if (p >= n_parts)
            status = rg_fail(err, RG_BAD_INPUT, "facet %zu belongs to part %u of %zu parts", f, p, n_parts);
        else
            status = rg_soup_facet(soup, c[0], c[1], c[2], p, err);
    }
    return status;
}

/* Names as they are, also equal ones: a part is what the caller numbers. */
static rg_status copy_names(rg_soup *soup, size_t n_parts, const char *const part_name[], rg_error *err)
{
    soup->part_name = calloc(n_parts, sizeof *soup->part_name);
    if (!soup->part_name) return rg_fail(err, RG_NO_MEMORY, "no memory for part names");
    for (; soup->n_parts < n_parts; soup->n_parts++) {
        soup->part_name[soup->n_parts] = strdup(part_name[soup->n_parts]);
        if (!soup->part_name[soup->n_parts]) return rg_fail(err, RG_NO_MEMORY, "no memory for part names");
    }
    return RG_OK;
}

rg_status rg_mesh_from_arrays(rg_mesh **out, size_t n_vertices, const double vertex_m[][3], size_t n_facets,
                              const uint32_t facet[][3], const uint32_t part[], size_t n_parts,
                              const char *const part_name[], rg_error *err)
{
    static const char *const whole[] = {"mesh"};
    const rg_turn as_is = {1.0, {0, 1, 2}, {1.0, 1.0, 1.0}};
    const rg_mesh_report report = {.format = "arrays", .assumed = "metres, x to the front, z up"};
    rg_soup soup = {0};
    rg_status status = part && n_parts == 0 ? rg_fail(err, RG_BAD_INPUT, "facets name parts, but there are no parts") : RG_OK;
    if (!status) status = copy_arrays(&soup, n_vertices, vertex_m, n_facets, facet, part, part ? n_parts : 1, err);
    if (!status) status = copy_names(&soup, part ? n_parts : 1, part ? part_name : whole, err);
    if (!status) status = rg_mesh_build(out, &soup, &as_is, &report, err);
    rg_soup_free(&soup);
    return status;
}

void rg_mesh_free(rg_mesh *mesh)
{
    if (!mesh) return;
    for (size_t p = 0; p < mesh->n_parts; p++) free(mesh->part_name[p]);
    free(mesh->part_name);
    free(mesh->part_first);
    free(mesh->vertex_m);
    free(mesh->facet);
    free(mesh->part);
    free(mesh->shell);
    free(mesh->neighbour);
    free(mesh->shells);
    free(mesh);
}

size_t rg_mesh_n_facets(const rg_mesh *mesh) { return mesh->n_facets; }
size_t rg_mesh_n_vertices(const rg_mesh *mesh) { return mesh->n_vertices; }
size_t rg_mesh_n_parts(const rg_mesh *mesh) { return mesh->n_parts; }

const char *rg_mesh_part_name(const rg_mesh *mesh, size_t part) { return part < mesh->n_parts ? mesh->part_name[part] : NULL; }

size_t rg_mesh_part_n_facets(const rg_mesh *mesh, size_t part)
{
    return part < mesh->n_parts ? mesh->part_first[part + 1] - mesh->part_first[part] : 0;
}

double rg_mesh_part_area_m2(const rg_mesh *mesh, size_t part)
{
    rg_sum area_m2 = {0};
    if (part >= mesh->n_parts) return 0.0;
    for (size_t f = mesh->part_first[part]; f < mesh->part_first[part + 1]; f++)
        rg_sum_add(&area_m2, 0.5 * vec3_norm(twice_area(mesh, f)));
    return rg_sum_value(&area_m2);
}

const rg_mesh_report *rg_mesh_get_report(const rg_mesh *mesh) { return &mesh->report; }
