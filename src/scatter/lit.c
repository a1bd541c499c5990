/* lit.c - which portions of which facets does the radar see? */
#include "scatter/lit.h"
#include "base/sum.h"
#include "scatter/occluder.h"
#include <math.h>
#include <stdlib.h>

/* Up to this many occluders are cut out exactly; more, and the piece is halved first. */
enum { EXACT_OCCLUDERS = 24, POLYGONS = 160 };

/* A triangle of the facet's, barycentric. */
typedef struct { double a[3], b[3]; } part_of_facet;

struct rg_lit_scratch {
    rg_pieces pieces;
    uint32_t *near;                 /* what the prism query named */
    size_t near_room;
    rg_region *region;              /* what the occluders of the facet in hand hide */
    size_t n_regions, region_room;
    uint32_t *list;                 /* indices of regions, one stretch a level of the halving */
    size_t list_room;
    rg_polygon polygon[2][POLYGONS];
    /* the facet in hand */
    rg_face face;
    double grain_m;
};

rg_status rg_seen_new(rg_seen *seen, const rg_mesh *mesh, rg_error *err)
{
    seen->n_vertices = mesh->n_vertices;
    seen->at_m = malloc(mesh->n_vertices * sizeof *seen->at_m);
    return seen->at_m ? RG_OK : rg_fail(err, RG_NO_MEMORY, "no memory for %zu vertices as seen", mesh->n_vertices);
}

void rg_seen_turn(rg_seen *seen, const rg_mesh *mesh, const rg_view *view)
{
    double reach_m = 0.0;
    seen->view = *view;
    for (size_t i = 0; i < mesh->n_vertices; i++) {
        const vec3 r = vec3_from(mesh->vertex_m[i]);
        seen->at_m[i][0] = vec3_dot(view->h, r);
        seen->at_m[i][1] = vec3_dot(view->v, r);
        seen->at_m[i][2] = vec3_dot(view->s, r);
        reach_m = fmax(reach_m, fmax(fabs(r.x), fmax(fabs(r.y), fabs(r.z))));
    }
    seen->reach_m = reach_m;
}

void rg_seen_free(rg_seen *seen)
{
    free(seen->at_m);
    *seen = (rg_seen){0};
}

rg_lit_scratch *rg_lit_scratch_new(void) { return calloc(1, sizeof(rg_lit_scratch)); }

void rg_lit_scratch_free(rg_lit_scratch *scratch)
{
    if (!scratch) return;
    for (int i = 0; i < 3; i++) free(scratch->pieces.path_m[i]);
    free(scratch->pieces.weight_m2);
    free(scratch->near);
    free(scratch->region);
    free(scratch->list);
    free(scratch);
}

/* Makes room for n elements at least; doubles, so that growing is rare. False without memory, and then nothing has changed. */
static bool make_room(void **array, size_t *room, size_t n, size_t element)
{
    if (n <= *room) return true;
    const size_t wanted = n > 2 * *room ? n : 2 * *room;
    void *grown = realloc(*array, wanted * element);
    if (!grown) return false;
    *array = grown;
    *room = wanted;
    return true;
}

static bool make_piece_room(rg_pieces *pieces, size_t n)
{
    bool fits = true;
    size_t room = pieces->room;
    for (int i = 0; i < 3; i++) {
        size_t this_room = pieces->room;
        fits = fits && make_room((void **)&pieces->path_m[i], &this_room, n, sizeof(double));
    }
    fits = fits && make_room((void **)&pieces->weight_m2, &room, n, sizeof(double));
    if (fits) pieces->room = room;
    return fits;
}

static bool add_piece(rg_lit_scratch *scratch, const double a[3], const double b[3])
{
    rg_pieces *pieces = &scratch->pieces;
    const rg_face *face = &scratch->face;
    const double share = (a[1] - a[0]) * (b[2] - b[0]) - (b[1] - b[0]) * (a[2] - a[0]);
    if (share <= 0.0) return true;                          /* three corners on one line, but for rounding */
    if (pieces->n == pieces->room && !make_piece_room(pieces, pieces->n + 1)) return false;
    for (int i = 0; i < 3; i++)
        pieces->path_m[i][pieces->n] = 2.0 * (face->at_m[0][2] * (1.0 - a[i] - b[i]) + face->at_m[1][2] * a[i] + face->at_m[2][2] * b[i]);
    pieces->weight_m2[pieces->n++] = face->normal_m2[2] * share;
    return true;
}

static bool add_polygon(rg_lit_scratch *scratch, const rg_polygon *p)
{
    bool fits = true;
    for (int i = 1; i + 1 < p->n; i++) {
        const double a[3] = {p->a[0], p->a[i], p->a[i + 1]}, b[3] = {p->b[0], p->b[i], p->b[i + 1]};
        fits = fits && add_piece(scratch, a, b);
    }
    return fits;
}

typedef enum { MISSES, REACHES, COVERS } reach_of_region;

static reach_of_region reach(const rg_region *region, const part_of_facet *part)
{
    int inside_all = 0;
    for (int e = 0; e < region->n; e++) {
        int in = 0, out = 0;
        for (int i = 0; i < 3; i++) {
            const double f = rg_half_plane_at(&region->edge[e], part->a[i], part->b[i]);
            in += f >= 0.0;
            out += f <= 0.0;
        }
        if (out == 3) return MISSES;
        inside_all += in == 3;
    }
    return inside_all == region->n ? COVERS : REACHES;
}

static bool hides_middle(const rg_region *region, const part_of_facet *part)
{
    const double a = (part->a[0] + part->a[1] + part->a[2]) / 3.0, b = (part->b[0] + part->b[1] + part->b[2]) / 3.0;
    for (int e = 0; e < region->n; e++)
        if (rg_half_plane_at(&region->edge[e], a, b) < 0.0) return false;
    return true;
}

/* The lit polygons of a part, all shadows cut out; false when they do not fit, and then nothing has been added. *enough is false
 * without memory. */
static bool cut_out(rg_lit_scratch *scratch, const part_of_facet *part, const uint32_t list[], size_t n_list, bool *enough)
{
    rg_polygon *from = scratch->polygon[0], *to = scratch->polygon[1];
    size_t n = 1;
    from[0].n = 3;
    for (int i = 0; i < 3; i++) {
        from[0].a[i] = part->a[i];
        from[0].b[i] = part->b[i];
    }
    for (size_t o = 0; o < n_list && n > 0; o++) {
        size_t n_to = 0;
        for (size_t i = 0; i < n; i++) {
            size_t added;
            if (!rg_polygon_minus(&from[i], &scratch->region[list[o]], POLYGONS - n_to, to + n_to, &added)) return false;
            n_to += added;
        }
        rg_polygon *swap = from;
        from = to;
        to = swap;
        n = n_to;
    }
    for (size_t i = 0; i < n && *enough; i++) *enough = add_polygon(scratch, &from[i]);
    return true;
}

/* Squared length of the side opposite to corner i. */
static double side2_m2(const rg_face *face, const part_of_facet *part, int i)
{
    const int j = (i + 1) % 3, k = (i + 2) % 3;
    const double a = part->a[k] - part->a[j], b = part->b[k] - part->b[j];
    double sum = 0.0;
    for (int axis = 0; axis < 3; axis++) {
        const double d = a * (face->at_m[1][axis] - face->at_m[0][axis]) + b * (face->at_m[2][axis] - face->at_m[0][axis]);
        sum += d * d;
    }
    return sum;
}

/* Adds what is lit of a part of the facet; the regions that may reach it are list[first .. first + n - 1]. False without memory. */
static bool add_lit(rg_lit_scratch *scratch, const part_of_facet *part, size_t first, size_t n)
{
    bool enough = true;
    if (n == 0) return add_piece(scratch, part->a, part->b);
    if (n <= EXACT_OCCLUDERS && cut_out(scratch, part, scratch->list + first, n, &enough)) return enough;

    int longest = 0;
    double length2_m2 = 0.0;
    for (int i = 0; i < 3; i++) {
        const double side2 = side2_m2(&scratch->face, part, i);
        if (side2 > length2_m2) { length2_m2 = side2; longest = i; }
    }
    if (length2_m2 <= scratch->grain_m * scratch->grain_m) {
        for (size_t i = 0; i < n; i++)
            if (hides_middle(&scratch->region[scratch->list[first + i]], part)) return true;
        return add_piece(scratch, part->a, part->b);
    }

    const int j = (longest + 1) % 3, k = (longest + 2) % 3;
    const double a = 0.5 * (part->a[j] + part->a[k]), b = 0.5 * (part->b[j] + part->b[k]);
    const part_of_facet half[2] = {{{part->a[longest], part->a[j], a}, {part->b[longest], part->b[j], b}},
                                   {{part->a[longest], a, part->a[k]}, {part->b[longest], b, part->b[k]}}};
    for (int side = 0; side < 2 && enough; side++) {
        size_t kept = 0;
        bool covered = false;
        if (!make_room((void **)&scratch->list, &scratch->list_room, first + 2 * n, sizeof *scratch->list)) return false;
        for (size_t i = 0; i < n && !covered; i++) {
            const uint32_t region = scratch->list[first + i];
            const reach_of_region found = reach(&scratch->region[region], &half[side]);
            covered = found == COVERS;
            if (found == REACHES) scratch->list[first + n + kept++] = region;
        }
        if (!covered) enough = add_lit(scratch, &half[side], first + n, kept);
    }
    return enough;
}

static int by_index(const void *a, const void *b)
{
    const uint32_t x = *(const uint32_t *)a, y = *(const uint32_t *)b;
    return (x > y) - (x < y);
}

typedef enum { SHADOW_NONE, SHADOW_PART, SHADOW_ALL, SHADOW_NO_MEMORY } shadow;

/* Gathers the regions that are hidden of the facet in hand, in the order of the occluders' indices. */
static shadow gather_regions(const rg_scene *scene, const rg_seen *seen, rg_lit_scratch *scratch)
{
    static const part_of_facet whole = {{0.0, 1.0, 0.0}, {0.0, 0.0, 1.0}};
    const rg_mesh *mesh = scene->mesh;
    const rg_face *face = &scratch->face;
    rg_prism prism = {.toward = {seen->view.s.x, seen->view.s.y, seen->view.s.z}};
    for (int i = 0; i < 3; i++)
        for (int axis = 0; axis < 3; axis++) prism.corner_m[i][axis] = mesh->vertex_m[face->vertex[i]][axis];
    size_t n = rg_bvh_in_prism(scene->bvh, &prism, scratch->near_room, scratch->near);
    if (n > scratch->near_room) {
        if (!make_room((void **)&scratch->near, &scratch->near_room, n, sizeof *scratch->near)) return SHADOW_NO_MEMORY;
        n = rg_bvh_in_prism(scene->bvh, &prism, scratch->near_room, scratch->near);
    }

    size_t kept = 0;                                        /* only what truly hides something is worth sorting */
    for (size_t i = 0; i < n; i++) {
        rg_face other;
        rg_region region;
        if (scratch->near[i] == face->index || !rg_face_seen(&other, mesh, seen, scratch->near[i])) continue;
        if (!rg_occluder_region(&region, face, &other, mesh->report.weld_m)) continue;
        if (reach(&region, &whole) == COVERS) return SHADOW_ALL;
        scratch->near[kept++] = scratch->near[i];
    }
    if (kept == 0) return SHADOW_NONE;
    if (!make_room((void **)&scratch->region, &scratch->region_room, kept, sizeof *scratch->region) ||
        !make_room((void **)&scratch->list, &scratch->list_room, kept, sizeof *scratch->list))
        return SHADOW_NO_MEMORY;
    qsort(scratch->near, kept, sizeof *scratch->near, by_index);
    for (size_t i = 0; i < kept; i++) {
        rg_face other;
        rg_face_seen(&other, mesh, seen, scratch->near[i]);
        rg_occluder_region(&scratch->region[i], face, &other, mesh->report.weld_m);
        scratch->list[i] = (uint32_t)i;
    }
    scratch->n_regions = kept;
    return SHADOW_PART;
}

static bool add_facet(const rg_scene *scene, const rg_seen *seen, rg_lit_scratch *scratch)
{
    const part_of_facet whole = {{0.0, 1.0, 0.0}, {0.0, 0.0, 1.0}};
    switch (gather_regions(scene, seen, scratch)) {
    case SHADOW_NONE: return add_piece(scratch, whole.a, whole.b);
    case SHADOW_PART: return add_lit(scratch, &whole, 0, scratch->n_regions);
    case SHADOW_ALL: return true;
    default: return false;
    }
}

rg_status rg_lit_block(const rg_scene *scene, const rg_seen *seen, const rg_block *block, double grain_m,
                       rg_lit_scratch *scratch, const rg_pieces **pieces, rg_error *err)
{
    rg_pieces *mine = &scratch->pieces;
    bool enough = true;
    mine->n = 0;
    scratch->grain_m = grain_m;
    for (uint32_t i = 0; i < block->n && enough; i++)
        if (rg_face_seen(&scratch->face, scene->mesh, seen, block->first + i)) enough = add_facet(scene, seen, scratch);
    enough = enough && make_piece_room(mine, mine->n + RG_LANES);
    if (!enough) return rg_fail(err, RG_NO_MEMORY, "no memory for the lit pieces of %u facets", block->n);
    for (; mine->n % RG_LANES; mine->n++) {
        for (int i = 0; i < 3; i++) mine->path_m[i][mine->n] = 0.0;
        mine->weight_m2[mine->n] = 0.0;
    }
    *pieces = mine;
    return RG_OK;
}
