/* cover.c - a raster across the line of sight that proves most facets wholly lit or wholly dark */
#include "scatter/cover.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>

#define NO_PATCH UINT32_MAX

/* Cells for each facet, and bounds on all. */
enum { CELLS_PER_FACET = 2, LEAST_CELLS = 1024, MOST_CELLS = 4000000 };

/* A cell's border is widened by this share of a cell, far more than a coordinate's rounding: what touches a cell counts as in it. */
#define BORDER 0x1p-16

typedef struct {
    uint32_t patch;                 /* the nearest one at the middle */
    bool torn;                      /* its rim runs through the cell */
    uint8_t layers;                 /* of that patch at the middle, up to 2 */
    double nearest_m;               /* how near it is at the middle, along s */
    double farthest_m;              /* the farthest that its facets reach in the cell */
    double other_m;                 /* the nearest that a facet of any other patch reaches in the cell */
} cell;

struct rg_cover {
    cell *cells;
    size_t room;
    int n[2];
    double low_m[2], cell_m, same_m;
    uint32_t *patch_of;             /* [n_facets] */
    uint32_t *stack;                /* [n_facets] */
};

rg_status rg_cover_new(rg_cover **out, const rg_mesh *mesh, rg_error *err)
{
    rg_cover *cover = calloc(1, sizeof *cover);
    if (!cover) return rg_fail(err, RG_NO_MEMORY, "no memory for the cover");
    const double wanted = fmin(fmax((double)CELLS_PER_FACET * (double)mesh->n_facets, LEAST_CELLS), MOST_CELLS);
    cover->room = (size_t)wanted;
    cover->same_m = mesh->report.weld_m;
    cover->cells = malloc(cover->room * sizeof *cover->cells);
    cover->patch_of = malloc(mesh->n_facets * sizeof *cover->patch_of);
    cover->stack = malloc(mesh->n_facets * sizeof *cover->stack);
    if (!cover->cells || !cover->patch_of || !cover->stack) {
        rg_cover_free(cover);
        return rg_fail(err, RG_NO_MEMORY, "no memory for the cover of %zu facets", mesh->n_facets);
    }
    *out = cover;
    return RG_OK;
}

void rg_cover_free(rg_cover *cover)
{
    if (!cover) return;
    free(cover->cells);
    free(cover->patch_of);
    free(cover->stack);
    free(cover);
}

/* Square cells over all that is seen, no more of them than there is room for. */
static void place_cells(rg_cover *cover, const rg_mesh *mesh, const rg_seen *seen)
{
    double low[2] = {INFINITY, INFINITY}, high[2] = {-INFINITY, -INFINITY};
    for (size_t i = 0; i < mesh->n_vertices; i++)
        for (int axis = 0; axis < 2; axis++) {
            low[axis] = fmin(low[axis], seen->at_m[i][axis]);
            high[axis] = fmax(high[axis], seen->at_m[i][axis]);
        }
    const double width = high[0] - low[0], height = high[1] - low[1];
    /* (width/c + 2)(height/c + 2) cells; seen as a line, as many as there is room for along it */
    double c = sqrt(width * height / (double)cover->room);
    c = fmax(c, 4.0 * (width + height) / (double)cover->room);
    while ((width / c + 2.0) * (height / c + 2.0) > (double)cover->room) c *= 1.1;
    cover->cell_m = c;
    for (int axis = 0; axis < 2; axis++) {
        cover->low_m[axis] = low[axis] - 0.5 * c;
        cover->n[axis] = (int)((high[axis] - cover->low_m[axis]) / c) + 1;
    }
    const cell empty = {.patch = NO_PATCH, .nearest_m = -INFINITY, .farthest_m = INFINITY, .other_m = -INFINITY};
    const size_t n_cells = (size_t)cover->n[0] * (size_t)cover->n[1];
    for (size_t i = 0; i < n_cells; i++) cover->cells[i] = empty;
}

/* Which side of each facet shows: 1 its outer one, 2 the other one of a sheet, 0 none. Kept in patch_of until patches are found. */
static void find_sides(rg_cover *cover, const rg_mesh *mesh, const rg_seen *seen)
{
    for (uint32_t i = 0; i < mesh->n_facets; i++) {
        rg_face face;
        cover->patch_of[i] = !rg_face_seen(&face, mesh, seen, i) ? 0 : face.vertex[1] == mesh->facet[i][1] ? 1 : 2;
    }
}

/* Numbers the patches 3, 4 ... and leaves NO_PATCH where nothing is seen. */
static void find_patches(rg_cover *cover, const rg_mesh *mesh)
{
    uint32_t next = 3;
    for (uint32_t first = 0; first < mesh->n_facets; first++) {
        const uint32_t side = cover->patch_of[first];
        if (side == 0) cover->patch_of[first] = NO_PATCH;
        if (side != 1 && side != 2) continue;
        size_t n = 0;
        cover->stack[n++] = first;
        cover->patch_of[first] = next;
        while (n > 0) {
            const uint32_t facet = cover->stack[--n];
            for (int e = 0; e < 3; e++) {
                const uint32_t other = mesh->neighbour[facet][e];
                if (other >= mesh->n_facets || cover->patch_of[other] != side) continue;
                cover->patch_of[other] = next;
                cover->stack[n++] = other;
            }
        }
        next++;
    }
}

typedef struct { int from[2], to[2]; } cell_range;

static int clamp_index(double index, int n) { return index < 0.0 ? 0 : index >= n ? n - 1 : (int)index; }

static cell_range range_of(const rg_cover *cover, size_t n, const double (*const at_m[])[3])
{
    cell_range range;
    for (int axis = 0; axis < 2; axis++) {
        double low = INFINITY, high = -INFINITY;
        for (size_t i = 0; i < n; i++) {
            const double x = (*at_m[i])[axis];
            low = x < low ? x : low;
            high = x > high ? x : high;
        }
        range.from[axis] = clamp_index((low - cover->low_m[axis]) / cover->cell_m - BORDER, cover->n[axis]);
        range.to[axis] = clamp_index((high - cover->low_m[axis]) / cover->cell_m + BORDER, cover->n[axis]);
    }
    return range;
}

/* A face made ready for cells: an edge function is f + x fx + y fy at the middle of cell (x, y), and reaches up to `slack` higher in it. */
typedef struct {
    cell_range range;
    double f[3], fx[3], fy[3], slack[3], touch[3];
    double p, px, py, p_slack, p_low, p_high;       /* the same of the place along s */
} drawn_face;

static drawn_face draw_face(const rg_cover *cover, const rg_face *face)
{
    const double (*const at_m[])[3] = {&face->at_m[0], &face->at_m[1], &face->at_m[2]};
    drawn_face d = {.range = range_of(cover, 3, at_m)};
    const double c = cover->cell_m, x0 = cover->low_m[0] + 0.5 * c, y0 = cover->low_m[1] + 0.5 * c;
    for (int e = 0; e < 3; e++) {
        const double *p = face->at_m[e], *q = face->at_m[(e + 1) % 3], dx = q[0] - p[0], dy = q[1] - p[1];
        d.f[e] = dx * (y0 - p[1]) - dy * (x0 - p[0]);
        d.fx[e] = -dy * c;
        d.fy[e] = dx * c;
        d.touch[e] = BORDER * (fabs(d.fx[e]) + fabs(d.fy[e]));
        d.slack[e] = 0.5 * (fabs(d.fx[e]) + fabs(d.fy[e])) + d.touch[e];
    }
    const double *n = face->normal_m2, *o = face->at_m[0];
    d.px = -n[0] / n[2] * c;
    d.py = -n[1] / n[2] * c;
    d.p = o[2] - (n[0] * (x0 - o[0]) + n[1] * (y0 - o[1])) / n[2];
    d.p_slack = (0.5 + BORDER) * (fabs(d.px) + fabs(d.py));
    d.p_low = fmin(o[2], fmin(face->at_m[1][2], face->at_m[2][2]));
    d.p_high = fmax(o[2], fmax(face->at_m[1][2], face->at_m[2][2]));
    return d;
}

static bool has_middle(const drawn_face *d, int x, int y)
{
    for (int e = 0; e < 3; e++)
        if (d->f[e] + x * d->fx[e] + y * d->fy[e] < -d->touch[e]) return false;
    return true;
}

static bool touches(const drawn_face *d, int x, int y)
{
    for (int e = 0; e < 3; e++)
        if (d->f[e] + x * d->fx[e] + y * d->fy[e] < -d->slack[e]) return false;
    return true;
}

/* How far and how near the face reaches in a cell. */
static void reach_in_cell(const drawn_face *d, int x, int y, double *far_m, double *near_m)
{
    const double middle = d->p + x * d->px + y * d->py;
    const double far = middle - d->p_slack, near = middle + d->p_slack;
    *far_m = far > d->p_low ? far : d->p_low;
    *near_m = near < d->p_high ? near : d->p_high;
}

static void draw_nearest(rg_cover *cover, const drawn_face *d, uint32_t patch)
{
    for (int y = d->range.from[1]; y <= d->range.to[1]; y++)
        for (int x = d->range.from[0]; x <= d->range.to[0]; x++) {
            cell *c = &cover->cells[(size_t)y * (size_t)cover->n[0] + (size_t)x];
            const double middle = d->p + x * d->px + y * d->py;
            if (middle <= c->nearest_m || !has_middle(d, x, y)) continue;
            c->nearest_m = middle;
            c->patch = patch;
        }
}

static void draw_reach(rg_cover *cover, const drawn_face *d, uint32_t patch)
{
    for (int y = d->range.from[1]; y <= d->range.to[1]; y++)
        for (int x = d->range.from[0]; x <= d->range.to[0]; x++) {
            if (!touches(d, x, y)) continue;
            cell *c = &cover->cells[(size_t)y * (size_t)cover->n[0] + (size_t)x];
            double far_m, near_m;
            reach_in_cell(d, x, y, &far_m, &near_m);
            if (c->patch != patch) {
                if (near_m > c->other_m) c->other_m = near_m;
            } else {
                if (far_m < c->farthest_m) c->farthest_m = far_m;
                if (c->layers < 2 && has_middle(d, x, y)) c->layers++;
            }
        }
}

/* Tears the cells of a patch that one of its rim's edges touches. */
static void draw_rim(rg_cover *cover, const double p[3], const double q[3], uint32_t patch)
{
    const double (*const end_m[])[3] = {(const double(*)[3])p, (const double(*)[3])q};
    const cell_range range = range_of(cover, 2, end_m);
    const double c = cover->cell_m, dx = q[0] - p[0], dy = q[1] - p[1];
    const double f0 = dx * (cover->low_m[1] + 0.5 * c - p[1]) - dy * (cover->low_m[0] + 0.5 * c - p[0]);
    const double slack = (0.5 + BORDER) * c * (fabs(dx) + fabs(dy));
    for (int y = range.from[1]; y <= range.to[1]; y++)
        for (int x = range.from[0]; x <= range.to[0]; x++) {
            cell *here = &cover->cells[(size_t)y * (size_t)cover->n[0] + (size_t)x];
            if (here->patch == patch && fabs(f0 - x * dy * c + y * dx * c) <= slack) here->torn = true;
        }
}

static void draw_rims(rg_cover *cover, const rg_mesh *mesh, const rg_seen *seen, uint32_t facet)
{
    const uint32_t patch = cover->patch_of[facet];
    for (int e = 0; e < 3; e++) {
        const uint32_t other = mesh->neighbour[facet][e];
        if (other < mesh->n_facets && cover->patch_of[other] == patch) continue;
        draw_rim(cover, seen->at_m[mesh->facet[facet][e]], seen->at_m[mesh->facet[facet][(e + 1) % 3]], patch);
    }
}

void rg_cover_draw(rg_cover *cover, const rg_mesh *mesh, const rg_seen *seen)
{
    place_cells(cover, mesh, seen);
    find_sides(cover, mesh, seen);
    find_patches(cover, mesh);
    for (int pass = 0; pass < 2; pass++)
        for (uint32_t i = 0; i < mesh->n_facets; i++) {
            rg_face face;
            if (cover->patch_of[i] == NO_PATCH) continue;
            rg_face_seen(&face, mesh, seen, i);
            const drawn_face d = draw_face(cover, &face);
            if (pass == 0) {
                draw_nearest(cover, &d, cover->patch_of[i]);
            } else {
                draw_reach(cover, &d, cover->patch_of[i]);
                draw_rims(cover, mesh, seen, i);
            }
        }
}

/* All of the face in this cell is behind the patch that covers it. */
static bool dark_in_cell(const rg_cover *cover, const cell *c, double near_m)
{
    return c->patch != NO_PATCH && !c->torn && c->farthest_m > near_m + cover->same_m;
}

rg_cover_state rg_cover_of(const rg_cover *cover, const rg_face *face, double open_m[4])
{
    const drawn_face d = draw_face(cover, face);
    const uint32_t patch = cover->patch_of[face->index];
    cell_range open = {{d.range.to[0] + 1, d.range.to[1] + 1}, {d.range.from[0] - 1, d.range.from[1] - 1}};
    bool lit = true;
    for (int y = d.range.from[1]; y <= d.range.to[1]; y++)
        for (int x = d.range.from[0]; x <= d.range.to[0]; x++) {
            if (!touches(&d, x, y)) continue;
            const cell *c = &cover->cells[(size_t)y * (size_t)cover->n[0] + (size_t)x];
            double far_m, near_m;
            reach_in_cell(&d, x, y, &far_m, &near_m);
            lit = lit && c->patch == patch && !c->torn && c->layers == 1 && c->other_m < far_m - cover->same_m;
            if (dark_in_cell(cover, c, near_m)) continue;
            if (x < open.from[0]) open.from[0] = x;
            if (x > open.to[0]) open.to[0] = x;
            if (y < open.from[1]) open.from[1] = y;
            if (y > open.to[1]) open.to[1] = y;
        }
    for (int axis = 0; axis < 2; axis++) {
        open_m[2 * axis] = cover->low_m[axis] + open.from[axis] * cover->cell_m;
        open_m[2 * axis + 1] = cover->low_m[axis] + (open.to[axis] + 1) * cover->cell_m;
    }
    return lit ? RG_COVER_LIT : open.from[0] > open.to[0] ? RG_COVER_DARK : RG_COVER_UNKNOWN;
}
