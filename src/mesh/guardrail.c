/* guardrail.c - a W-beam on steel posts with wooden blockouts and button-headed bolts
 *
 * The rail is a closed solid of the sheet's true thickness: the radar sees the rear of the sheet over the rail's top edge and from
 * behind, and a solid has an inside that nothing looks into. Pieces lap at the splices: the next piece begins behind the one before it
 * and steps forward where that one ends. The section's tangent points, and the corners between them, lie on the true section. Where
 * two parts touch, one is sunk into the other, so that no two faces share a plane.
 *
 * Figures marked [S] were read in a source, [M] are from memory. It is a demo target: not a drawing to build from.
 */
#include "base/elementary.h"
#include "mesh/patch.h"
#include "mesh/shapes.h"
#include <stdlib.h>
#include <string.h>

/* W-beam, AASHTO M 180 */
#define SHEET_M 0.00267         /* base metal, class A, 12 gauge [S] */
#define TALL_M 0.312            /* [M] */
#define DEEP_M 0.083            /* front of the crests to back of the valley [M] */
#define INNER_BEND_M 0.024      /* [M] */
#define FLANK_DEG 55.0          /* from the plane of the crests [M] */
#define CRESTS_APART_M 0.194    /* [M] */
#define LIP_M 0.005             /* straight part of the lips, which point straight back and stay clear of the blockouts; invented */
#define PIECE_M 3.81            /* effective length, 12.5 ft [S] */
#define HALF_LAP_M 0.16         /* a piece is 4.13 over all [M] */
#define LAP_GAP_M 0.0002        /* so that lapped sheets do not share a surface; invented */
#define STEP_M 0.05             /* along which the lower sheet steps forward; invented */
/* The system: 31 in to the rail's top, splices midway between posts */
#define RAIL_TOP_M 0.787        /* [S] */
#define POST_SPACING_M 1.905    /* [S] */
#define POST_TOP_M 0.813        /* 1.829 long, 1.016 in the ground [S] */
#define POST_DEEP_M 0.148       /* W6 x 8.5 [M] */
#define POST_WIDE_M 0.100
#define POST_WEB_M 0.0043
#define POST_FLANGE_M 0.0049
#define BLOCK_WIDE_M 0.150      /* 6 x 12 x 14.25 in [S] */
#define BLOCK_DEEP_M 0.305
#define BLOCK_TALL_M 0.360
#define SUNK_M 0.001            /* the post's flange into the blockout */
#define HEAD_WIDE_M 0.033       /* button head [M] */
#define HEAD_TALL_M 0.008       /* [M] */
#define SPLICE_BOLT_M 0.108     /* to either side of the splice's middle, 4.25 in [M] */

#define RAIL_MIDDLE_M (RAIL_TOP_M - 0.5 * TALL_M)
#define BEND_M (INNER_BEND_M + 0.5 * SHEET_M)                   /* radius of the sheet's middle */
#define LAP_M (SHEET_M + LAP_GAP_M)
#define WIDEST_BEND_M (INNER_BEND_M + SHEET_M + LAP_M)          /* back of a valley's bend in the lower sheet of a lap */

/* The sheet's middle: depth x from the valley's, height z from the section's middle, and the unit normal toward the road. */
typedef struct { double x, z, nx, nz; } profile_point;

/* Half of the section, from the valley's middle upward: straights and bends in turn. */
typedef struct { double length_m, radius_m, from_deg, to_deg; } profile_piece;
enum { N_PIECES = 7 };

static void half_section(profile_piece piece[N_PIECES])
{
    double c, s;
    rg_cis_pi(FLANK_DEG / 180.0, &c, &s);
    const double flank_m = (DEEP_M - SHEET_M - 2.0 * BEND_M * (1.0 - c)) / s;
    const double valley_m = 0.5 * CRESTS_APART_M - 2.0 * BEND_M * s - flank_m * c;
    const double outer_m = (0.5 * (TALL_M - SHEET_M - CRESTS_APART_M) - BEND_M * s - BEND_M * (1.0 - s)) / c;
    const profile_piece pieces[N_PIECES] = {
        {valley_m, 0.0, 0.0, 0.0}, {0.0, BEND_M, 0.0, FLANK_DEG}, {flank_m, 0.0, FLANK_DEG, FLANK_DEG},
        {0.0, BEND_M, FLANK_DEG, -FLANK_DEG}, {outer_m, 0.0, -FLANK_DEG, -FLANK_DEG}, {0.0, BEND_M, -FLANK_DEG, -90.0},
        {LIP_M, 0.0, -90.0, -90.0}};
    memcpy(piece, pieces, sizeof pieces);
}

/* Steps of a piece; of the crest an even number, so that its foremost line is there. */
static double steps_of(const profile_piece *piece, const rg_shape *shape, double cell_m)
{
    if (piece->radius_m == 0.0) return rg_pieces(piece->length_m, cell_m);
    const double turns = fabs(piece->to_deg - piece->from_deg) / 360.0;
    const rg_circle whole = rg_circle_of(WIDEST_BEND_M, shape->sagitta_m, cell_m);
    return 2.0 * ceil(0.5 * turns * whole.n);
}

/* Direction along the section at an angle from +z toward +x. */
static void along(double deg, double *x, double *z) { rg_cis_pi(deg / 180.0, z, x); }

/* The upper half, its lowest point in the valley's middle. point NULL: only counts. */
static double upper_half(const rg_shape *shape, double cell_m, profile_point *point)
{
    profile_piece piece[N_PIECES];
    double x = 0.0, z = 0.0, n_points = 1.0;
    half_section(piece);
    if (point) *point++ = (profile_point){0.0, 0.0, 1.0, 0.0};
    for (int p = 0; p < N_PIECES; p++) {
        const double n = steps_of(&piece[p], shape, cell_m), from = piece[p].from_deg, to = piece[p].to_deg;
        n_points += n;
        if (!point) continue;
        double x0, z0, x1, z1;
        along(from, &x0, &z0);
        const double r = to > from ? piece[p].radius_m : -piece[p].radius_m, start_x = x, start_z = z;
        for (double i = 1.0; i <= n; i++) {
            along(from + (to - from) * i / n, &x1, &z1);
            x = start_x + piece[p].length_m * i / n * x0 + r * (z0 - z1);
            z = start_z + piece[p].length_m * i / n * z0 + r * (x1 - x0);
            *point++ = (profile_point){x, z, z1, -x1};
        }
    }
    return n_points;
}

/* --- the plan --- */

/* The edge left for one side of a cell. Where a sheet steps forward, cells are sheared by less than 1 % of their size. */
static double cell_for(double edge_m) { return 0.99 * sqrt(0.5) * edge_m; }

static double n_pieces(const rg_shape *shape) { return fmax(1.0, floor((shape->size_m[0] + 0.001) / PIECE_M)); }   /* a millimetre short is still whole */

/* Posts stand midway between splices, and near the ends no nearer than a blockout is wide. */
static double n_posts(const rg_shape *shape)
{
    return fmax(1.0, floor((shape->size_m[0] - 0.5 * POST_SPACING_M - BLOCK_WIDE_M) / POST_SPACING_M + 1.0));
}

static double post_y(const rg_shape *shape, double i)
{
    const double length_m = shape->size_m[0];
    if (length_m < 0.5 * POST_SPACING_M + BLOCK_WIDE_M) return 0.0;
    return -0.5 * length_m + POST_SPACING_M * (i + 0.5);
}

/* A bolt's head: a cap of a sphere, and the disc that closes it within the sheet. */
typedef struct {
    double sphere_m, half_angle, rim_m;
    rg_disc_plan cap, foot;
    double n_facets;
} head_plan;

static head_plan plan_head(const rg_shape *shape)
{
    const double a = 0.5 * HEAD_WIDE_M, cell_m = cell_for(shape->edge_m), tall_m = HEAD_TALL_M + 0.5 * SHEET_M;
    head_plan head = {.sphere_m = (a * a + HEAD_TALL_M * HEAD_TALL_M) / (2.0 * HEAD_TALL_M)};
    head.rim_m = sqrt(tall_m * (2.0 * head.sphere_m - tall_m));
    head.half_angle = rg_atan2(head.rim_m, head.sphere_m - tall_m);
    const double arc_m = head.sphere_m * head.half_angle;
    /* A triangle of sides q, q and its diagonal has the circumradius q/sqrt 2, and the sagitta q^2/(4r). */
    double step_m = arc_m / 2.0;
    if (shape->sagitta_m > 0.0) step_m = fmin(step_m, 2.0 * sqrt(shape->sagitta_m * head.sphere_m));
    if (cell_m > 0.0) step_m = fmin(step_m, cell_m);
    const rg_circle rim = rg_circle_of(head.rim_m, shape->sagitta_m, step_m);
    const double rings = rg_pieces(arc_m, step_m), foot_rings = rg_pieces(head.rim_m, cell_m);
    const double foot_step = foot_rings > 1.0 ? cell_m / head.rim_m : 1.0;
    head.n_facets = 4.0 * rg_disc_n_facets(rim.n, rings, step_m / arc_m) + 4.0 * rg_disc_n_facets(rim.n, foot_rings, foot_step);
    if (!(head.n_facets < 1e9)) return head;
    head.cap = (rg_disc_plan){(size_t)rim.n, (size_t)rings, step_m / arc_m};
    head.foot = (rg_disc_plan){(size_t)rim.n, (size_t)foot_rings, foot_step};
    return head;
}

static double n_bolts(const rg_shape *shape) { return n_posts(shape) + 8.0 * (n_pieces(shape) - 1.0); }

double rg_guardrail_count(const rg_shape *shape)
{
    const double cell_m = cell_for(shape->edge_m), layers = rg_pieces(SHEET_M, cell_m);
    const double around = 2.0 * (2.0 * (upper_half(shape, cell_m, NULL) - 1.0) + layers);
    const double rows = rg_pieces(shape->size_m[0], cell_m) + 4.0 * n_pieces(shape);
    const double rail = 2.0 * around * rows + 2.0 * around * layers * n_pieces(shape);
    const double deep = rg_pieces(BLOCK_DEEP_M, cell_m), wide = rg_pieces(BLOCK_WIDE_M, cell_m), tall = rg_pieces(BLOCK_TALL_M, cell_m);
    const double block = 4.0 * (deep * wide + wide * tall + tall * deep);
    const double post_around = 4.0 * rg_pieces(POST_WIDE_M, cell_m) + 2.0 * rg_pieces(POST_DEEP_M, cell_m) + 24.0;
    const double post = 2.0 * post_around * rg_pieces(POST_TOP_M, cell_m) + 2.0 * post_around * rg_pieces(POST_WIDE_M, cell_m);
    return rail + n_posts(shape) * (block + post) + n_bolts(shape) * plan_head(shape).n_facets;
}

/* --- the rail --- */

/* A cross section through one piece: where, and by how much its sheet lies back. */
typedef struct { double y, back_m; } station;

typedef struct {
    const profile_point *profile;       /* [n_profile], from the lower lip to the upper one */
    size_t n_profile, n_layers;
    station from, to;
} stretch;

/* A point of the sheet: index along the profile, share of the thickness from the front. */
static vec3 sheet_point(const stretch *s, double i, double depth, double v)
{
    const profile_point *p = &s->profile[(size_t)i];
    const double back_m = s->from.back_m + (s->to.back_m - s->from.back_m) * v, off_m = SHEET_M * (0.5 - depth) - back_m;
    return (vec3){p->x + off_m * p->nx - (DEEP_M - 0.5 * SHEET_M), s->from.y + (s->to.y - s->from.y) * v, p->z + off_m * p->nz + RAIL_MIDDLE_M};
}

/* u goes around the sheet: up its front, back over the upper lip's end, down its rear, forward under the lower lip's end. */
static vec3 point_around(const void *of, double u, double v)
{
    const stretch *s = of;
    const double n = (double)(s->n_profile - 1), m = (double)s->n_layers, at = rint(u * 2.0 * (n + m));
    if (at <= n) return sheet_point(s, at, 0.0, v);
    if (at <= n + m) return sheet_point(s, n, (at - n) / m, v);
    if (at <= 2.0 * n + m) return sheet_point(s, 2.0 * n + m - at, 1.0, v);
    return sheet_point(s, 0.0, (2.0 * (n + m) - at) / m, v);
}

static vec3 point_of_end(const void *of, double u, double v)
{
    const stretch *s = of;
    return sheet_point(s, rint(u * (double)(s->n_profile - 1)), v, 0.0);
}

static vec3 point_of_far_end(const void *of, double u, double v)
{
    const stretch *s = of;
    return sheet_point(s, rint(v * (double)(s->n_profile - 1)), u, 1.0);
}

/* u runs up the front and v toward +y: du x dv = z x y points back, so the grid is laid with the two exchanged. */
static vec3 point_along(const void *of, double u, double v) { return point_around(of, v, u); }

static rg_status rail_piece(rg_soup *soup, uint32_t part, stretch *s, size_t n_stations, const station at[], double cell_m, rg_error *err)
{
    const size_t n = s->n_profile - 1, m = s->n_layers;
    rg_status status = RG_OK;
    for (size_t i = 0; i + 1 < n_stations && !status; i++) {
        s->from = at[i], s->to = at[i + 1];
        const double run_m = s->to.y - s->from.y, shift_m = s->to.back_m - s->from.back_m;
        const size_t rows = (size_t)rg_pieces(sqrt(run_m * run_m + shift_m * shift_m), cell_m);
        status = rg_patch_grid(soup, part, rows, 2 * (n + m), point_along, s, err);
        if (!status && i == 0) status = rg_patch_grid(soup, part, n, m, point_of_end, s, err);
        if (!status && i + 2 == n_stations) status = rg_patch_grid(soup, part, m, n, point_of_far_end, s, err);
    }
    return status;
}

static rg_status add_rail(rg_soup *soup, const rg_shape *shape, uint32_t part, rg_error *err)
{
    const double cell_m = cell_for(shape->edge_m), length_m = shape->size_m[0], pieces = n_pieces(shape);
    const size_t n_half = (size_t)upper_half(shape, cell_m, NULL), n_profile = 2 * n_half - 1;
    profile_point *profile = malloc(n_profile * sizeof *profile);
    if (!profile) return rg_fail(err, RG_NO_MEMORY, "no memory for the rail's section");
    upper_half(shape, cell_m, profile + n_half - 1);
    for (size_t i = 0; i + 1 < n_half; i++) {
        const profile_point up = profile[n_profile - 1 - i];
        profile[i] = (profile_point){up.x, -up.z, up.nx, -up.nz};
    }
    stretch s = {.profile = profile, .n_profile = n_profile, .n_layers = (size_t)rg_pieces(SHEET_M, cell_m)};
    rg_status status = RG_OK;
    for (double k = 0.0; k < pieces && !status; k++) {
        const double start = -0.5 * length_m + k * PIECE_M, end = k + 1.0 < pieces ? start + PIECE_M + HALF_LAP_M : 0.5 * length_m;
        const station at[] = {{start - HALF_LAP_M, LAP_M}, {start + HALF_LAP_M, LAP_M}, {start + HALF_LAP_M + STEP_M, 0.0}, {end, 0.0}};
        const station whole[] = {{start, 0.0}, {end, 0.0}};
        status = k > 0.0 ? rail_piece(soup, part, &s, 4, at, cell_m, err) : rail_piece(soup, part, &s, 2, whole, cell_m, err);
    }
    free(profile);
    return status;
}

/* --- boxes and posts: cells of a coarse lattice, some of them full --- */

typedef struct { vec3 corner, along, up; } face;

static vec3 point_of_face(const void *of, double u, double v)
{
    const face *f = of;
    return vec3_add(f->corner, vec3_add(vec3_scale(f->along, u), vec3_scale(f->up, v)));
}

enum { MOST_LINES = 4 };
typedef struct {
    int n[3];                           /* cells along x, y, z */
    double line[3][MOST_LINES];         /* [axis][n + 1], rising */
    unsigned full;                      /* bit x + 3 y: the cells of that column are full */
} lattice;

static bool is_full(const lattice *l, const int at[3])
{
    for (int i = 0; i < 3; i++)
        if (at[i] < 0 || at[i] >= l->n[i]) return false;
    return l->full >> (at[0] + 3 * at[1]) & 1u;
}

/* The side of a full cell along an axis, where nothing full is behind it. */
static rg_status add_side(rg_soup *soup, uint32_t part, const lattice *l, const int at[3], int axis, int side, double cell_m, rg_error *err)
{
    int behind[3] = {at[0], at[1], at[2]};
    behind[axis] += side ? 1 : -1;
    if (is_full(l, behind)) return RG_OK;
    const int next = (axis + 1) % 3, last = (axis + 2) % 3, u = side ? next : last, v = side ? last : next;
    double corner[3], step[2][3] = {{0}};
    for (int i = 0; i < 3; i++) corner[i] = l->line[i][at[i] + (i == axis ? side : 0)];
    step[0][u] = l->line[u][at[u] + 1] - corner[u];
    step[1][v] = l->line[v][at[v] + 1] - corner[v];
    const face f = {vec3_from(corner), vec3_from(step[0]), vec3_from(step[1])};
    return rg_patch_grid(soup, part, (size_t)rg_pieces(step[0][u], cell_m), (size_t)rg_pieces(step[1][v], cell_m), point_of_face, &f, err);
}

static rg_status add_lattice(rg_soup *soup, uint32_t part, const lattice *l, double cell_m, rg_error *err)
{
    rg_status status = RG_OK;
    for (int x = 0; x < l->n[0]; x++)
        for (int y = 0; y < l->n[1]; y++)
            for (int z = 0; z < l->n[2]; z++) {
                const int at[] = {x, y, z};
                for (int i = 0; i < 6 && is_full(l, at) && !status; i++) status = add_side(soup, part, l, at, i / 2, i % 2, cell_m, err);
            }
    return status;
}

#define BLOCK_FRONT_M (-DEEP_M + 0.5 * SHEET_M)     /* sunk into the valley by half of the sheet */

static rg_status add_block(rg_soup *soup, uint32_t part, double y, double cell_m, rg_error *err)
{
    const lattice box = {.n = {1, 1, 1}, .full = 1, .line = {{BLOCK_FRONT_M - BLOCK_DEEP_M, BLOCK_FRONT_M},
                                                             {y - 0.5 * BLOCK_WIDE_M, y + 0.5 * BLOCK_WIDE_M},
                                                             {RAIL_MIDDLE_M - 0.5 * BLOCK_TALL_M, RAIL_MIDDLE_M + 0.5 * BLOCK_TALL_M}}};
    return add_lattice(soup, part, &box, cell_m, err);
}

static rg_status add_post(rg_soup *soup, uint32_t part, double y, double cell_m, rg_error *err)
{
    const double front = BLOCK_FRONT_M - BLOCK_DEEP_M + SUNK_M, rear = front - POST_DEEP_M, half = 0.5 * POST_WIDE_M, web = 0.5 * POST_WEB_M;
    const lattice post = {.n = {3, 3, 1}, .full = 0575 /* both flanges, and the web in the middle row */,
                          .line = {{rear, rear + POST_FLANGE_M, front - POST_FLANGE_M, front}, {y - half, y - web, y + web, y + half},
                                   {0.0, POST_TOP_M}}};
    return add_lattice(soup, part, &post, cell_m, err);
}

/* --- bolts --- */

typedef struct { const head_plan *plan; vec3 foot, axis, right, up; } head;

static vec3 head_point(const head *h, double right, double up, double out)
{
    return vec3_add(vec3_add(h->foot, vec3_scale(h->axis, out)), vec3_add(vec3_scale(h->right, right), vec3_scale(h->up, up)));
}

/* The distance from the disc's middle becomes the angle from the cap's. */
static vec3 point_of_cap(const void *of, double u, double v)
{
    const head *h = of;
    const double radius = fmin(sqrt(u * u + v * v), 1.0), half = h->plan->half_angle / RG_SIN_PI_0, r = h->plan->sphere_m;
    double c, s, rim_c, rim_s;
    rg_cis_pi(half * radius, &c, &s);
    rg_cis_pi(half, &rim_c, &rim_s);
    const double wider = radius > 0.0 ? r * s / radius : 0.0;
    return head_point(h, wider * u, wider * v, r * (c - rim_c));
}

static vec3 point_of_foot(const void *of, double u, double v)
{
    const head *h = of;
    return head_point(h, h->plan->rim_m * v, h->plan->rim_m * u, 0.0);
}

/* A head on the sheet's front, closed in the sheet's middle, whose x and z are given with the angle of the section there. */
static rg_status add_head(rg_soup *soup, uint32_t part, const head_plan *plan, double x, double y, double z, double deg, rg_error *err)
{
    double tx, tz;
    along(deg, &tx, &tz);
    const vec3 axis = {tz, 0.0, -tx}, up = {tx, 0.0, tz}, middle = {x - (DEEP_M - 0.5 * SHEET_M), y, z + RAIL_MIDDLE_M};
    const head h = {plan, middle, axis, {0.0, 1.0, 0.0}, up};
    const rg_status status = rg_patch_disc(soup, part, 0, 4, &plan->cap, point_of_cap, &h, err);
    return status ? status : rg_patch_disc(soup, part, 0, 4, &plan->foot, point_of_foot, &h, err);
}

/* Eight in the middles of the four flanks, on both sides of the splice. */
static rg_status add_splice_bolts(rg_soup *soup, uint32_t part, const head_plan *plan, double y, rg_error *err)
{
    profile_piece piece[N_PIECES];
    double x[2], z[2], c, s;
    half_section(piece);
    rg_cis_pi(FLANK_DEG / 180.0, &c, &s);
    x[0] = BEND_M * (1.0 - c) + 0.5 * piece[2].length_m * s;
    z[0] = piece[0].length_m + BEND_M * s + 0.5 * piece[2].length_m * c;
    x[1] = DEEP_M - SHEET_M - BEND_M * (1.0 - c) - 0.5 * piece[4].length_m * s;
    z[1] = 0.5 * CRESTS_APART_M + BEND_M * s + 0.5 * piece[4].length_m * c;
    rg_status status = RG_OK;
    for (int i = 0; i < 8 && !status; i++) {
        const int flank = i & 1;
        const double at_y = i & 2 ? y + SPLICE_BOLT_M : y - SPLICE_BOLT_M, deg = flank ? -FLANK_DEG : FLANK_DEG;
        status = i & 4 ? add_head(soup, part, plan, x[flank], at_y, -z[flank], -deg, err) :
                         add_head(soup, part, plan, x[flank], at_y, z[flank], deg, err);
    }
    return status;
}

static rg_status add_bolts(rg_soup *soup, const rg_shape *shape, uint32_t part, rg_error *err)
{
    const head_plan plan = plan_head(shape);
    const double posts = n_posts(shape), pieces = n_pieces(shape);
    rg_status status = RG_OK;
    for (double i = 0.0; i < posts && !status; i++) status = add_head(soup, part, &plan, 0.0, post_y(shape, i), 0.0, 0.0, err);
    for (double k = 1.0; k < pieces && !status; k++)
        status = add_splice_bolts(soup, part, &plan, -0.5 * shape->size_m[0] + k * PIECE_M, err);
    return status;
}

rg_status rg_guardrail_build(rg_soup *soup, const rg_shape *shape, rg_error *err)
{
    static const char *const name[] = {"rail", "posts", "blockouts", "bolts"};
    const double cell_m = cell_for(shape->edge_m), posts = n_posts(shape);
    uint32_t part[4];
    rg_status status = RG_OK;
    for (int i = 0; i < 4 && !status; i++) status = rg_soup_part(soup, &part[i], name[i], strlen(name[i]), err);
    if (!status) status = add_rail(soup, shape, part[0], err);
    for (double i = 0.0; i < posts && !status; i++) {
        status = add_post(soup, part[1], post_y(shape, i), cell_m, err);
        if (!status) status = add_block(soup, part[2], post_y(shape, i), cell_m, err);
    }
    return status ? status : add_bolts(soup, shape, part[3], err);
}
