/* lit.c - which portions of which facets does the radar see? */
#include "scatter/lit.h"
#include "base/room.h"
#include "base/sum.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>

/* Occluders are cut out of a part at once while that takes this many cuts and leaves this many polygons; more, and it is halved first. */
enum { CUTS_AT_ONCE = 1000, POLYGONS_AT_ONCE = 160 };

const rg_polygon rg_whole_facet = {.n = 3, .a = {0.0, 1.0, 0.0}, .b = {0.0, 0.0, 1.0}};

struct rg_lit_scratch {
    uint32_t *near;                 /* what the prism query named */
    double *nearest_m;              /* how near each of those reaches, along s */
    size_t near_room, nearest_room;
    rg_region *region;              /* what those hide of the face */
    size_t region_room;
    uint32_t *list;                 /* indices of regions, one stretch for each level of the halving */
    size_t list_room;
    rg_polygon cut[2][POLYGONS_AT_ONCE];
    double undecided_m2;
};

/* What add_lit hands down unchanged. */
typedef struct {
    const rg_face *face;
    double grain_m;
    rg_lit_scratch *scratch;
    rg_polygons *lit;
} lit_job;

rg_lit_scratch *rg_lit_scratch_new(void) { return calloc(1, sizeof(rg_lit_scratch)); }

void rg_lit_scratch_free(rg_lit_scratch *scratch)
{
    if (!scratch) return;
    free(scratch->near);
    free(scratch->nearest_m);
    free(scratch->region);
    free(scratch->list);
    free(scratch);
}

static bool add_polygon(rg_polygons *list, const rg_polygon *polygon)
{
    if (!rg_make_room((void **)&list->polygon, &list->room, list->n + 1, sizeof *list->polygon)) return false;
    list->polygon[list->n++] = *polygon;
    return true;
}

typedef enum { MISSES, REACHES, COVERS } reach_of_region;

static reach_of_region reach(const rg_region *region, const rg_polygon *part)
{
    int n_covering = 0;
    for (int e = 0; e < region->n; e++) {
        int in = 0, out = 0;
        for (int i = 0; i < part->n; i++) {
            const double f = rg_half_plane_at(&region->edge[e], part->a[i], part->b[i]);
            in += f >= 0.0;
            out += f <= 0.0;
        }
        if (out == part->n) return MISSES;
        n_covering += in == part->n;
    }
    return n_covering == region->n ? COVERS : REACHES;
}

static bool hides_middle(const rg_region *region, const rg_polygon *part)
{
    double a = 0.0, b = 0.0;
    for (int i = 0; i < part->n; i++) { a += part->a[i]; b += part->b[i]; }
    for (int e = 0; e < region->n; e++)
        if (rg_half_plane_at(&region->edge[e], a / part->n, b / part->n) < 0.0) return false;
    return true;
}

double rg_lit_take_undecided_m2(rg_lit_scratch *scratch)
{
    const double taken = scratch->undecided_m2;
    scratch->undecided_m2 = 0.0;
    return taken;
}

/* A part of a face while shadows are cut out of it. */
typedef struct { rg_polygon *now, *next; size_t n, cuts; } cutting;

static cutting start_cutting(rg_lit_scratch *scratch, const rg_polygon *part)
{
    scratch->cut[0][0] = *part;
    return (cutting){.now = scratch->cut[0], .next = scratch->cut[1], .n = 1};
}

/* Cuts one region out of all polygons; false when it takes too much, and then the cutting is of no use any more. */
static bool cut_out(cutting *c, const rg_region *region)
{
    size_t n_next = 0;
    c->cuts += c->n;
    if (c->cuts > CUTS_AT_ONCE) return false;
    for (size_t i = 0; i < c->n; i++) {
        size_t added;
        if (!rg_polygon_minus(&c->now[i], region, POLYGONS_AT_ONCE - n_next, c->next + n_next, &added)) return false;
        n_next += added;
    }
    rg_polygon *swap = c->now;
    c->now = c->next;
    c->next = swap;
    c->n = n_next;
    return true;
}

static bool add_polygons(rg_polygons *list, const cutting *c)
{
    bool enough = true;
    for (size_t i = 0; i < c->n && enough; i++) enough = add_polygon(list, &c->now[i]);
    return enough;
}

static void corner_m(const rg_face *face, const rg_polygon *part, int i, double at_m[3])
{
    for (int axis = 0; axis < 3; axis++)
        at_m[axis] = face->at_m[0][axis] * (1.0 - part->a[i] - part->b[i]) + face->at_m[1][axis] * part->a[i] + face->at_m[2][axis] * part->b[i];
}

/* The two corners that are farthest apart; returns their distance squared. */
static double longest_m2(const rg_face *face, const rg_polygon *part, double p[3], double q[3])
{
    double longest = -1.0;
    for (int i = 0; i < part->n; i++)
        for (int k = 0; k < i; k++) {
            double x[3], y[3], sum = 0.0;
            corner_m(face, part, i, x);
            corner_m(face, part, k, y);
            for (int axis = 0; axis < 3; axis++) sum += (x[axis] - y[axis]) * (x[axis] - y[axis]);
            if (sum <= longest) continue;
            longest = sum;
            for (int axis = 0; axis < 3; axis++) { p[axis] = x[axis]; q[axis] = y[axis]; }
        }
    return longest;
}

/* The plane half-way between two points, as a half-plane on the face. */
static rg_half_plane half_way(const rg_face *face, const double p[3], const double q[3])
{
    rg_half_plane plane;
    for (int i = 0; i < 3; i++) {
        plane.at_corner[i] = 0.0;
        for (int axis = 0; axis < 3; axis++)
            plane.at_corner[i] += (face->at_m[i][axis] - 0.5 * (p[axis] + q[axis])) * (p[axis] - q[axis]);
    }
    return plane;
}

static bool add_halves(const lit_job *job, const rg_polygon *part, size_t first, size_t n);
static bool add_half(const lit_job *job, const rg_polygon *half, size_t first, size_t n);

/* Appends what is lit of a part; the regions that may reach it are list[first .. first + n - 1]. False without memory. */
static bool add_lit(const lit_job *job, const rg_polygon *part, size_t first, size_t n)
{
    cutting c = start_cutting(job->scratch, part);
    for (size_t i = 0; i < n && c.n > 0; i++)
        if (!cut_out(&c, &job->scratch->region[job->scratch->list[first + i]])) return add_halves(job, part, first, n);
    return add_polygons(job->lit, &c);
}

/* The same by halves, which fewer regions reach; a part no longer than the grain as its middle is. */
static bool add_halves(const lit_job *job, const rg_polygon *part, size_t first, size_t n)
{
    rg_lit_scratch *scratch = job->scratch;
    bool enough = true;
    double p[3], q[3];
    if (longest_m2(job->face, part, p, q) <= job->grain_m * job->grain_m) {
        scratch->undecided_m2 += 0.5 * job->face->normal_m2[2] * rg_polygon_area2(part);
        for (size_t i = 0; i < n; i++)
            if (hides_middle(&scratch->region[scratch->list[first + i]], part)) return true;
        return add_polygon(job->lit, part);
    }

    const rg_half_plane middle = half_way(job->face, p, q);
    rg_polygon half[2];
    rg_polygon_split(part, &middle, &half[0], &half[1]);
    for (int side = 0; side < 2 && enough; side++) enough = add_half(job, &half[side], first, n);
    return enough;
}

/* What is lit of a half, by the regions of the whole that still reach it. */
static bool add_half(const lit_job *job, const rg_polygon *half, size_t first, size_t n)
{
    rg_lit_scratch *scratch = job->scratch;
    size_t kept = 0;
    if (half->n == 0) return true;
    if (half->n > RG_POLYGON_CORNERS) {                     /* one more than can be cut */
        rg_polygon part[2];
        rg_polygon_part(half, part);
        return add_half(job, &part[0], first, n) && add_half(job, &part[1], first, n);
    }
    if (!rg_make_room((void **)&scratch->list, &scratch->list_room, first + 2 * n, sizeof *scratch->list)) return false;
    for (size_t i = 0; i < n; i++) {
        const uint32_t region = scratch->list[first + i];
        const reach_of_region found = reach(&scratch->region[region], half);
        if (found == COVERS) return true;
        if (found == REACHES) scratch->list[first + n + kept++] = region;
    }
    return add_lit(job, half, first + n, kept);
}

/* Names the facets in the shadow prism of a part of a face. */
static bool query_prism(const rg_scene *scene, const rg_seen *seen, const rg_face *face, const rg_polygon *part, rg_lit_scratch *scratch, size_t *n)
{
    rg_prism prism = {.toward = {seen->view.s.x, seen->view.s.y, seen->view.s.z}};
    rg_facet_point corner[3];
    rg_polygon_enclose(part, corner);
    const double *v[3];
    for (int i = 0; i < 3; i++) v[i] = scene->mesh->vertex_m[face->vertex[i]];
    for (int i = 0; i < 3; i++)
        for (int axis = 0; axis < 3; axis++)
            prism.corner_m[i][axis] = v[0][axis] * (1.0 - corner[i].a - corner[i].b) + v[1][axis] * corner[i].a + v[2][axis] * corner[i].b;
    *n = rg_bvh_in_prism(scene->bvh, &prism, scratch->near_room, scratch->near);
    if (*n > scratch->near_room) {
        if (!rg_make_room((void **)&scratch->near, &scratch->near_room, *n, sizeof *scratch->near)) return false;
        *n = rg_bvh_in_prism(scene->bvh, &prism, scratch->near_room, scratch->near);
    }
    return true;
}

/* What a facet must reach into to hide anything of a part: its shadow across the line of sight, as a box, and what is before its plane. */
typedef struct { double low_m[2], high_m[2], normal[3], at_m[3], same_m; } shadow_box;

static shadow_box box_of(const rg_face *face, const rg_polygon *part, double same_m)
{
    shadow_box box = {.low_m = {INFINITY, INFINITY}, .high_m = {-INFINITY, -INFINITY}};
    const double *n = face->normal_m2, length = sqrt(n[0] * n[0] + n[1] * n[1] + n[2] * n[2]);
    for (int i = 0; i < part->n; i++) {
        double at_m[3];
        corner_m(face, part, i, at_m);
        for (int axis = 0; axis < 2; axis++) {
            box.low_m[axis] = at_m[axis] < box.low_m[axis] ? at_m[axis] : box.low_m[axis];
            box.high_m[axis] = at_m[axis] > box.high_m[axis] ? at_m[axis] : box.high_m[axis];
        }
    }
    for (int axis = 0; axis < 3; axis++) {
        box.normal[axis] = n[axis] / length;
        box.at_m[axis] = face->at_m[0][axis];
    }
    box.same_m = same_m;
    return box;
}

/* False when a facet reaches nowhere into the box; *nearest_m: how near it is, along s. */
static bool meets_box(const shadow_box *box, const double (*const corner[3])[3], double *nearest_m)
{
    double low[2] = {INFINITY, INFINITY}, high[2] = {-INFINITY, -INFINITY};
    bool before = false;
    *nearest_m = -INFINITY;
    for (int c = 0; c < 3; c++) {
        const double *x = *corner[c];
        for (int axis = 0; axis < 2; axis++) {
            low[axis] = x[axis] < low[axis] ? x[axis] : low[axis];
            high[axis] = x[axis] > high[axis] ? x[axis] : high[axis];
        }
        *nearest_m = x[2] > *nearest_m ? x[2] : *nearest_m;
        before |= box->normal[0] * (x[0] - box->at_m[0]) + box->normal[1] * (x[1] - box->at_m[1]) +
                  box->normal[2] * (x[2] - box->at_m[2]) >= -box->same_m;
    }
    return before && low[0] <= box->high_m[0] && high[0] >= box->low_m[0] && low[1] <= box->high_m[1] && high[1] >= box->low_m[1];
}

/* Puts what was named in the order from near to far, so that a shadow is mostly found whole with the first few, and equals by index:
 * who named them must not show in the result. Leaves out what can hide nothing of the part. */
static bool sort_by_nearness(const rg_scene *scene, const rg_seen *seen, const rg_face *face, const rg_polygon *part, size_t *n_named,
                             rg_lit_scratch *scratch)
{
    uint32_t *near = scratch->near;
    size_t n = 0;
    if (!rg_make_room((void **)&scratch->nearest_m, &scratch->nearest_room, *n_named, sizeof *scratch->nearest_m)) return false;
    double *nearest_m = scratch->nearest_m;
    const shadow_box box = box_of(face, part, scene->mesh->report.weld_m);
    for (size_t i = 0; i < *n_named; i++) {
        const uint32_t *vertex = scene->mesh->facet[near[i]];
        double turned_m[3][3], place_m;
        const double (*corner[3])[3];
        for (int c = 0; c < 3; c++) {
            if (!seen->at_m) rg_seen_vertex(seen, scene->mesh, vertex[c], turned_m[c]);
            corner[c] = seen->at_m ? (const double(*)[3])&seen->at_m[vertex[c]] : (const double(*)[3])&turned_m[c];
        }
        if (near[i] == face->index || !meets_box(&box, corner, &place_m)) continue;
        near[n] = near[i];
        nearest_m[n++] = place_m;
    }
    *n_named = n;
    for (size_t step = n / 2; step > 0; step /= 2)          /* D. L. Shell, 1959; runs are short */
        for (size_t i = step; i < n; i++) {
            const uint32_t facet = near[i];
            const double place_m = nearest_m[i];
            size_t k = i;
            for (; k >= step && (nearest_m[k - step] < place_m || (nearest_m[k - step] == place_m && near[k - step] > facet)); k -= step) {
                near[k] = near[k - step];
                nearest_m[k] = nearest_m[k - step];
            }
            near[k] = facet;
            nearest_m[k] = place_m;
        }
    return true;
}

/* rg_lit_part once scratch->near[0 .. n - 1] are named. */
static bool lit_of_named(const rg_scene *scene, const rg_seen *seen, const rg_face *face, const rg_polygon *part, const rg_horizon *horizon,
                         size_t n, double grain_m, rg_lit_scratch *scratch, rg_polygons *lit)
{
    size_t n_hiding = 0;
    bool cuts_do = true;
    cutting c = start_cutting(scratch, part);
    if (!sort_by_nearness(scene, seen, face, part, &n, scratch)) return false;
    for (size_t i = 0; i < n; i++) {
        const uint32_t near = scratch->near[i];
        rg_face other;
        if (!rg_make_room((void **)&scratch->region, &scratch->region_room, n_hiding + 1, sizeof *scratch->region)) return false;
        rg_region *region = &scratch->region[n_hiding];
        if (!rg_face_seen(&other, scene->mesh, seen, near) ||
            !rg_occluder_region(region, scene->mesh, face, &other, horizon))
            continue;
        const reach_of_region found = reach(region, part);
        if (found == COVERS) return true;
        if (found == MISSES) continue;
        n_hiding++;
        cuts_do = cuts_do && cut_out(&c, region);
        if (cuts_do && c.n == 0) return true;
    }
    if (cuts_do) return add_polygons(lit, &c);
    if (!rg_make_room((void **)&scratch->list, &scratch->list_room, n_hiding, sizeof *scratch->list)) return false;
    for (size_t i = 0; i < n_hiding; i++) scratch->list[i] = (uint32_t)i;
    const lit_job job = {.face = face, .grain_m = grain_m, .scratch = scratch, .lit = lit};
    return add_halves(&job, part, 0, n_hiding);
}

bool rg_lit_part(const rg_scene *scene, const rg_seen *seen, const rg_face *face, const rg_polygon *part, const rg_horizon *horizon,
                 double grain_m, rg_lit_scratch *scratch, rg_polygons *lit)
{
    size_t n;
    return query_prism(scene, seen, face, part, scratch, &n) && lit_of_named(scene, seen, face, part, horizon, n, grain_m, scratch, lit);
}

bool rg_lit_among(const rg_scene *scene, const rg_seen *seen, const rg_face *face, const rg_polygon *part, const rg_horizon *horizon,
                  size_t n_named, const uint32_t named[], double grain_m, rg_lit_scratch *scratch, rg_polygons *lit)
{
    if (!rg_make_room((void **)&scratch->near, &scratch->near_room, n_named, sizeof *scratch->near)) return false;
    memcpy(scratch->near, named, n_named * sizeof *named);
    return lit_of_named(scene, seen, face, part, horizon, n_named, grain_m, scratch, lit);
}

/* What of a part lies in a window across the line of sight; n = 0 where nothing does. */
static rg_polygon in_window(const rg_face *face, const rg_polygon *part, const double window_m[4])
{
    rg_polygon inside = *part, outside;
    for (int side = 0; side < 4 && inside.n > 0; side++) {
        const rg_polygon before = inside;
        rg_half_plane plane;
        for (int i = 0; i < 3; i++) {
            const double beyond = face->at_m[i][side / 2] - window_m[side];
            plane.at_corner[i] = side % 2 == 0 ? beyond : -beyond;
        }
        if (!rg_polygon_split(&before, &plane, &inside, &outside)) inside = before;     /* a corner too many: what stays is dark, and cut off later */
    }
    return inside;
}

bool rg_lit_from_afar(const rg_scene *scene, const rg_seen *seen, const rg_cover *cover, const rg_face *face, const rg_polygon *part,
                      double grain_m, rg_lit_scratch *scratch, rg_polygons *lit)
{
    double open_m[4];
    const rg_cover_state state = rg_cover_of(cover, face, open_m);
    if (state == RG_COVER_LIT) return add_polygon(lit, part);
    if (state == RG_COVER_DARK) return true;
    const rg_polygon open = in_window(face, part, open_m);
    return open.n == 0 || rg_lit_part(scene, seen, face, &open, NULL, grain_m, scratch, lit);
}

static bool make_piece_room(rg_pieces *pieces, size_t n)
{
    double **array[] = {&pieces->path_m[0], &pieces->path_m[1], &pieces->path_m[2], &pieces->weight_m2};
    return rg_make_rooms(array, sizeof array / sizeof array[0], &pieces->room, n);
}

void rg_pieces_free(rg_pieces *pieces)
{
    for (int i = 0; i < 3; i++) free(pieces->path_m[i]);
    free(pieces->weight_m2);
    *pieces = (rg_pieces){0};
}

bool rg_pieces_add(rg_pieces *pieces, const rg_face *face, const rg_polygon *p)
{
    if (!make_piece_room(pieces, pieces->n + (size_t)p->n)) return false;
    for (int i = 1; i + 1 < p->n; i++) {
        const int corner[3] = {0, i, i + 1};
        const double share = rg_polygon_fan_area2(p, i);
        if (share <= 0.0) continue;                         /* three corners on one line, but for rounding */
        for (int c = 0; c < 3; c++) {
            const double a = p->a[corner[c]], b = p->b[corner[c]];
            pieces->path_m[c][pieces->n] = 2.0 * (face->at_m[0][2] * (1.0 - a - b) + face->at_m[1][2] * a + face->at_m[2][2] * b);
        }
        pieces->weight_m2[pieces->n++] = face->normal_m2[2] * share;
    }
    return true;
}

bool rg_pieces_pad(rg_pieces *pieces)
{
    if (!make_piece_room(pieces, pieces->n + RG_LANES)) return false;
    for (; pieces->n % RG_LANES; pieces->n++) {
        for (int i = 0; i < 3; i++) pieces->path_m[i][pieces->n] = 0.0;
        pieces->weight_m2[pieces->n] = 0.0;
    }
    return true;
}
