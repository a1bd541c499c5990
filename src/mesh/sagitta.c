/* sagitta.c - how far each flat facet stands off the smooth surface that it stands for: roadglint/fitness.h, docs/physics.md (4.2) */
#include "mesh/sagitta.h"
#include "base/vec3.h"
#include <stdlib.h>

#define COS_FEATURE 0.85716730070211233     /* 31 degrees: a tube of twelve sides, rounded, is still one */
#define COS_LONE 0.98480775301220806        /* 10 degrees */
#define COS_UNSURE 0.5                      /* 60 degrees */
#define LONE_RATIO 4.0                      /* a turn so much over all others near by is a crease */
#define UNSURE_RATIO 0.4                    /* a turn that goes on with at least this share may be a coarse curve */
/* How far the fit over neighbours may exceed what the corner normals say. They weigh facets by their area squared, so a flat face keeps
 * its own normal beside a fillet's narrow facets; on an arc of chords by turns of 1 and 2 they give 0.3 of the truth. */
#define NORMALS_LIMIT 2.5
/* Weight of the wish for small unknowns against equations of unit length. A regular net's weakest direction weighs 1/3, so it costs
 * 0.3 % there, and holds what the neighbours leave open near zero. */
#define RIDGE 1e-3

/* Two facets at an edge, as facet f sees it. */
typedef struct {
    double turn;            /* 4 tan(t/4), of the sign of rise_m */
    double cos_turn;
    double rise_m;          /* of the surface's quadratic from f's plane to the neighbour's far corner; positive where convex */
    double weight[3];       /* of f's corners in the neighbour's far corner, unfolded into f's plane */
    double chord_m;         /* the smaller of the two heights over the edge */
    vec3 along;             /* the edge's direction, unit */
} hinge;

typedef struct {
    const rg_mesh *mesh;
    vec3 *normal;           /* [n_facets], unit */
    double *area_m2;
    unsigned char *smooth;  /* [n_facets]: bit i: edge i is tessellation */
    uint32_t *fan;          /* [3 * n_facets]: corners whose facets hang together over smooth edges have one root */
    vec3 *fan_normal;       /* [3 * n_facets], at the roots: sum of area squared times normal */
    double noise_m;         /* what coordinates may be off by */
} survey;

static vec3 corner(const rg_mesh *mesh, size_t f, int i) { return vec3_from(mesh->vertex_m[mesh->facet[f][i]]); }

static vec3 unit(vec3 a)
{
    const double length = vec3_norm(a);
    return length > 0.0 ? vec3_scale(a, 1.0 / length) : a;
}

/* Where the facet across f's edge i has that edge; -1 when there is no such facet, or it is wound against f. */
static int edge_across(const rg_mesh *mesh, size_t f, int i)
{
    const uint32_t g = mesh->neighbour[f][i];
    if (g >= RG_MANY_FACETS) return -1;
    for (int j = 0; j < 3; j++)
        if (mesh->facet[g][j] == mesh->facet[f][(i + 1) % 3] && mesh->facet[g][(j + 1) % 3] == mesh->facet[f][i]) return j;
    return -1;
}

/* False when the edge has no one neighbour. */
static bool hinge_at(const survey *s, size_t f, int i, hinge *out)
{
    const rg_mesh *mesh = s->mesh;
    const int j = edge_across(mesh, f, i);
    if (j < 0) return false;
    const uint32_t g = mesh->neighbour[f][i];
    const int i1 = (i + 1) % 3, i2 = (i + 2) % 3;
    const vec3 a = corner(mesh, f, i), edge = vec3_sub(corner(mesh, f, i1), a);
    const vec3 own = vec3_sub(corner(mesh, f, i2), a), far = vec3_sub(corner(mesh, g, (j + 2) % 3), a);
    const double length_m = vec3_norm(edge), own_m = 2.0 * s->area_m2[f] / length_m, far_m = 2.0 * s->area_m2[g] / length_m;
    const double off_m = -vec3_dot(s->normal[f], far);
    const double sine = vec3_norm(vec3_cross(s->normal[f], s->normal[g]));
    out->cos_turn = vec3_dot(s->normal[f], s->normal[g]);
    out->along = vec3_scale(edge, 1.0 / length_m);
    out->chord_m = fmin(own_m, far_m);
    /* Unfolded: own_m turns over to the other side as far_m, and the places along the edge stay. */
    out->weight[i2] = -far_m / own_m;
    out->weight[i1] = (vec3_dot(far, out->along) - out->weight[i2] * vec3_dot(own, out->along)) / length_m;
    out->weight[i] = 1.0 - out->weight[i1] - out->weight[i2];
    const double reach = 1.0 + fabs(out->weight[0]) + fabs(out->weight[1]) + fabs(out->weight[2]);
    if (out->cos_turn > 0.0 && fabs(off_m) <= reach * s->noise_m) {
        out->turn = out->rise_m = 0.0;
    } else {
        const double half = out->cos_turn > -1.0 ? sine / (1.0 + out->cos_turn) : INFINITY;     /* tan(t/2) */
        out->turn = copysign(half < 1e6 ? 4.0 * half / (1.0 + sqrt(1.0 + half * half)) : 4.0, off_m);
        out->rise_m = far_m * out->turn;
    }
    return true;
}

/* The largest turn like that of h at f's edge i among the edges one and two steps beyond f; what they turn across h's edge is lost. */
static double turn_beyond(const survey *s, size_t f, int i, const hinge *h)
{
    double largest = 0.0;
    for (int k = 1; k < 3; k++) {
        hinge next, after;
        const int i1 = (i + k) % 3;
        if (!hinge_at(s, f, i1, &next)) continue;
        largest = fmax(largest, copysign(1.0, h->turn) * next.turn * fabs(vec3_dot(next.along, h->along)));
        const int j = edge_across(s->mesh, f, i1);
        if (next.cos_turn < COS_FEATURE) continue;
        for (int m = 1; m < 3; m++)
            if (hinge_at(s, s->mesh->neighbour[f][i1], (j + m) % 3, &after))
                largest = fmax(largest, copysign(1.0, h->turn) * after.turn * fabs(vec3_dot(after.along, h->along)));
    }
    return largest;
}

/* Sets the smooth bits; counts the rest. An edge is looked at from its facet of the lower index, so both agree. */
static void sort_edges(survey *s, rg_sagittas *out)
{
    const rg_mesh *mesh = s->mesh;
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) {
            hinge h;
            const uint32_t g = mesh->neighbour[f][i];
            if (g < f || !hinge_at(s, f, i, &h)) continue;
            const int j = edge_across(mesh, f, i);
            const double near = h.cos_turn < COS_LONE && h.cos_turn > COS_UNSURE ?
                                fmax(turn_beyond(s, f, i, &h), turn_beyond(s, g, j, &h)) : 0.0;
            const bool sharp = h.cos_turn < COS_FEATURE, lone = h.cos_turn < COS_LONE && fabs(h.turn) > LONE_RATIO * near;
            if (!sharp && !lone) {
                s->smooth[f] |= (unsigned char)(1 << i);
                s->smooth[g] |= (unsigned char)(1 << j);
                continue;
            }
            out->n_feature_edges++;
            if (sharp && near >= UNSURE_RATIO * fabs(h.turn)) {
                out->n_unsure_edges++;
                out->unsure_sagitta_m = fmax(out->unsure_sagitta_m, 0.125 * h.chord_m * fabs(h.turn));
            }
        }
}

static uint32_t root_of(uint32_t fan[], uint32_t c)
{
    while (fan[c] != c) c = fan[c] = fan[fan[c]];
    return c;
}

static void join(uint32_t fan[], uint32_t a, uint32_t b)
{
    a = root_of(fan, a), b = root_of(fan, b);
    if (a < b) fan[b] = a;
    else fan[a] = b;
}

/* One normal for the corners that meet at a vertex with only smooth edges between them. */
static void average_normals(survey *s)
{
    const rg_mesh *mesh = s->mesh;
    for (uint32_t c = 0; c < 3 * mesh->n_facets; c++) s->fan[c] = c;
    for (uint32_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) {
            const uint32_t g = mesh->neighbour[f][i];
            if (!(s->smooth[f] >> i & 1) || g < f) continue;
            const int j = edge_across(mesh, f, i);
            join(s->fan, 3 * f + (uint32_t)i, 3 * g + (uint32_t)((j + 1) % 3));
            join(s->fan, 3 * f + (uint32_t)((i + 1) % 3), 3 * g + (uint32_t)j);
        }
    for (uint32_t c = 0; c < 3 * mesh->n_facets; c++) {
        vec3 *sum = &s->fan_normal[root_of(s->fan, c)];
        *sum = vec3_add(*sum, vec3_scale(s->normal[c / 3], s->area_m2[c / 3] * s->area_m2[c / 3]));
    }
}

/* What the form q of facet g is along e, which is taken into g's plane. */
static double form_along(const survey *s, size_t g, const double q[3], vec3 e)
{
    const vec3 a = corner(s->mesh, g, 0), e0 = vec3_sub(corner(s->mesh, g, 1), a), e2 = vec3_sub(corner(s->mesh, g, 2), a);
    const double twice_m2 = 2.0 * s->area_m2[g];
    const double c0 = vec3_dot(vec3_cross(e, e2), s->normal[g]) / twice_m2, c2 = vec3_dot(vec3_cross(e0, e), s->normal[g]) / twice_m2;
    return c0 * c0 * q[0] + c2 * c2 * q[2] + c0 * c2 * (q[0] + q[2] - q[1]);    /* 2 II(e0, e2) = q0 + q2 - q1 */
}

/* The forms q[i] along the edges from corner i to i + 1 whose quadratic meets the neighbours' corners best, and of these the nearest to
 * wish[]. Returns over how many edges there was something to meet. */
static int fit_neighbours(const survey *s, size_t f, const double wish[3], double q[3])
{
    double normal[3][3] = {{RIDGE, 0, 0}, {0, RIDGE, 0}, {0, 0, RIDGE}}, right[3] = {0};
    int n = 0;
    for (int i = 0; i < 3; i++) {
        hinge h;
        if (!(s->smooth[f] >> i & 1) || !hinge_at(s, f, i, &h)) continue;
        const double row[3] = {-0.5 * h.weight[0] * h.weight[1], -0.5 * h.weight[1] * h.weight[2], -0.5 * h.weight[2] * h.weight[0]};
        const double scale = 1.0 / (row[0] * row[0] + row[1] * row[1] + row[2] * row[2]);
        const double rest_m = h.rise_m - (row[0] * wish[0] + row[1] * wish[1] + row[2] * wish[2]);
        for (int a = 0; a < 3; a++) {
            for (int b = 0; b < 3; b++) normal[a][b] += scale * row[a] * row[b];
            right[a] += scale * row[a] * rest_m;
        }
        n++;
    }
    /* Symmetric and at least RIDGE: by cofactors. */
    const vec3 r0 = vec3_from(normal[0]), r1 = vec3_from(normal[1]), r2 = vec3_from(normal[2]), b = vec3_from(right);
    const double det = vec3_dot(r0, vec3_cross(r1, r2));
    q[0] = wish[0] + vec3_dot(b, vec3_cross(r1, r2)) / det;
    q[1] = wish[1] + vec3_dot(b, vec3_cross(r2, r0)) / det;
    q[2] = wish[2] + vec3_dot(b, vec3_cross(r0, r1)) / det;
    return n;
}

/* With one neighbour: a bend along their edge i. The denominator is negative, for so is the far corner's weight. */
static void bend_once(const survey *s, size_t f, double q[3])
{
    hinge h;
    for (int i = 0; i < 3; i++) {
        if (!(s->smooth[f] >> i & 1) || !hinge_at(s, f, i, &h)) continue;
        const double w = h.weight[(i + 2) % 3];
        q[i] = 0.0;
        q[(i + 1) % 3] = q[(i + 2) % 3] = h.rise_m / (-0.5 * w * (1.0 - w));
    }
}

/* At the rim of a smooth patch a facet has too few neighbours to know all of its form: it then takes what they leave open from them. */
static void fit_form(const survey *s, size_t f, double q[3])
{
    static const double zero[3] = {0};
    double wish[3] = {0}, across[3];
    int n_wish = 0;
    const int n = fit_neighbours(s, f, zero, q);
    if (n == 3 || n == 0) return;
    for (int i = 0; i < 3; i++) {
        if (!(s->smooth[f] >> i & 1)) continue;
        const uint32_t g = s->mesh->neighbour[f][i];
        if (fit_neighbours(s, g, zero, across) < 3) continue;
        for (int k = 0; k < 3; k++)
            wish[k] += form_along(s, g, across, vec3_sub(corner(s->mesh, f, (k + 1) % 3), corner(s->mesh, f, k)));
        n_wish++;
    }
    if (n_wish) {
        for (int k = 0; k < 3; k++) wish[k] /= n_wish;
        fit_neighbours(s, f, wish, q);
    } else if (n == 1) {
        bend_once(s, f, q);
    }
}

static void fit_normals(const survey *s, size_t f, double q[3])
{
    vec3 n[3];
    for (int i = 0; i < 3; i++) n[i] = unit(s->fan_normal[root_of(s->fan, (uint32_t)(3 * f) + (uint32_t)i)]);
    for (int i = 0; i < 3; i++)
        q[i] = vec3_dot(vec3_sub(n[(i + 1) % 3], n[i]), vec3_sub(corner(s->mesh, f, (i + 1) % 3), corner(s->mesh, f, i)));
}

/* Largest |1/2 Sum w_i w_j q_ij| over the facet. Inside, q plays squared edge lengths: half the squared radius of their circumcircle. */
static double standoff_m(const double q[3])
{
    const double on_edge_m = fmax(fabs(q[0]), fmax(fabs(q[1]), fabs(q[2]))) / 8.0;
    const double w0 = q[1] * (q[0] + q[2] - q[1]), w1 = q[2] * (q[0] + q[1] - q[2]), w2 = q[0] * (q[1] + q[2] - q[0]);
    if (!(w0 > 0.0 && w1 > 0.0 && w2 > 0.0)) return on_edge_m;      /* opposite corner 0 lies edge 1; no maximum inside */
    return fmax(on_edge_m, 0.5 * fabs(q[0] * q[1] * q[2]) / (w0 + w1 + w2));
}

/* The larger principal curvature of the form with the values q along the facet's edges. */
static double curvature_per_m(const survey *s, size_t f, const double q[3])
{
    const vec3 a = corner(s->mesh, f, 0), e0 = vec3_sub(corner(s->mesh, f, 1), a), e2 = vec3_sub(corner(s->mesh, f, 2), a);
    const double x0 = vec3_norm(e0), x2 = vec3_dot(e0, e2) / x0, y2 = 2.0 * s->area_m2[f] / x0;
    const double xx = q[0] / (x0 * x0);
    const double xy = (0.5 * (q[0] + q[2] - q[1]) / x0 - xx * x2) / y2;     /* II(e0, e2), polarised */
    const double yy = (q[2] - xx * x2 * x2 - 2.0 * xy * x2 * y2) / (y2 * y2);
    const double mean = 0.5 * (xx + yy), half = 0.5 * (xx - yy);
    return fabs(mean) + sqrt(half * half + xy * xy);
}

static void measure_facet(const survey *s, size_t f, rg_sagittas *out)
{
    double q[3], bound[3];
    fit_form(s, f, q);
    fit_normals(s, f, bound);
    const double fitted_m = standoff_m(q), bound_m = NORMALS_LIMIT * standoff_m(bound);
    out->sagitta_m[f] = fmin(fitted_m, bound_m);
    out->curvature_per_m[f] = fitted_m > 0.0 ? curvature_per_m(s, f, q) * (out->sagitta_m[f] / fitted_m) : 0.0;
}

static void take_normals(survey *s)
{
    const rg_mesh *mesh = s->mesh;
    const rg_mesh_report *r = &mesh->report;
    const double extent_m = fmax(r->high_m[0] - r->low_m[0], fmax(r->high_m[1] - r->low_m[1], r->high_m[2] - r->low_m[2]));
    s->noise_m = 0.87 * r->coordinate_step_m + 0x1p-49 * extent_m;      /* half a step on each of three axes: sqrt(3)/2 */
    for (size_t f = 0; f < mesh->n_facets; f++) {
        const vec3 a = corner(mesh, f, 0);
        const vec3 twice = vec3_cross(vec3_sub(corner(mesh, f, 1), a), vec3_sub(corner(mesh, f, 2), a));
        s->area_m2[f] = 0.5 * vec3_norm(twice);
        s->normal[f] = unit(twice);
    }
}

rg_status rg_sagittas_find(rg_sagittas *out, const rg_mesh *mesh, rg_error *err)
{
    const size_t n = mesh->n_facets;
    survey s = {.mesh = mesh};
    rg_status status = RG_NO_MEMORY;
    *out = (rg_sagittas){0};
    if (n > UINT32_MAX / 3) goto done;      /* corners are counted in 32 bits */
    s.normal = malloc(n * sizeof *s.normal);
    s.area_m2 = malloc(n * sizeof *s.area_m2);
    s.smooth = calloc(n, sizeof *s.smooth);
    s.fan = malloc(3 * n * sizeof *s.fan);
    s.fan_normal = calloc(3 * n, sizeof *s.fan_normal);
    out->sagitta_m = malloc(n * sizeof *out->sagitta_m);
    out->curvature_per_m = malloc(n * sizeof *out->curvature_per_m);
    if (!s.normal || !s.area_m2 || !s.smooth || !s.fan || !s.fan_normal || !out->sagitta_m || !out->curvature_per_m) goto done;
    take_normals(&s);
    sort_edges(&s, out);
    average_normals(&s);
    for (size_t f = 0; f < n; f++) measure_facet(&s, f, out);
    status = RG_OK;
done:
    free(s.normal);
    free(s.area_m2);
    free(s.smooth);
    free(s.fan);
    free(s.fan_normal);
    if (!status) return RG_OK;
    rg_sagittas_free(out);
    return rg_fail(err, RG_NO_MEMORY, "no memory to judge %zu facets", n);
}

void rg_sagittas_free(rg_sagittas *sagittas)
{
    free(sagittas->sagitta_m);
    free(sagittas->curvature_per_m);
    *sagittas = (rg_sagittas){0};
}
