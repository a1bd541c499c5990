/* patch.c - the pieces of which shapes are put together: grids, triangles and discs cut into facets */
#include "mesh/patch.h"
#include "base/elementary.h"

#define N_LARGE 1e9     /* more than any shape may have; what is larger need not be exact */

static rg_status add_vertex(rg_soup *soup, vec3 r, rg_error *err) { return rg_soup_vertex(soup, r.x, r.y, r.z, err); }

/* Diagonals change their direction from cell to cell, so that a curved piece leans to no side. */
rg_status rg_patch_grid(rg_soup *soup, uint32_t part, size_t n_u, size_t n_v, rg_patch_at *at, const void *of, rg_error *err)
{
    rg_status status = rg_soup_reserve(soup, (n_u + 1) * (n_v + 1), 2 * n_u * n_v, err);
    const uint32_t base = (uint32_t)soup->n_vertices, row = (uint32_t)(n_v + 1);
    for (size_t i = 0; i <= n_u; i++)
        for (size_t j = 0; j <= n_v && !status; j++)
            status = add_vertex(soup, at(of, (double)i / (double)n_u, (double)j / (double)n_v), err);
    for (size_t i = 0; i < n_u; i++)
        for (size_t j = 0; j < n_v && !status; j++) {
            const uint32_t a = base + (uint32_t)i * row + (uint32_t)j, b = a + row, c = b + 1, d = a + 1;
            const bool falls = (i + j) % 2;
            status = falls ? rg_soup_facet(soup, a, b, d, part, err) : rg_soup_facet(soup, a, b, c, part, err);
            if (!status) status = falls ? rg_soup_facet(soup, b, c, d, part, err) : rg_soup_facet(soup, a, c, d, part, err);
        }
    return status;
}

rg_status rg_patch_triangle(rg_soup *soup, uint32_t part, size_t n, rg_patch_at *at, const void *of, rg_error *err)
{
    rg_status status = rg_soup_reserve(soup, (n + 1) * (n + 2) / 2, n * n, err);
    uint32_t first = (uint32_t)soup->n_vertices;
    for (size_t i = 0; i <= n; i++)
        for (size_t j = 0; j <= n - i && !status; j++)
            status = add_vertex(soup, at(of, (double)i / (double)n, (double)j / (double)n), err);
    for (size_t i = 0; i < n; i++) {
        const uint32_t next = first + (uint32_t)(n - i) + 1;
        for (uint32_t j = 0; j < n - i && !status; j++) {
            status = rg_soup_facet(soup, first + j, next + j, first + j + 1, part, err);
            if (!status && j + 1 < n - i) status = rg_soup_facet(soup, first + j + 1, next + j, next + j + 1, part, err);
        }
        first = next;
    }
    return status;
}

size_t rg_disc_n_rim(const rg_disc_plan *plan, size_t k)
{
    if (k == 0 || k == plan->n_rings) return k ? plan->n_rim : 0;
    const double arc = 0.5 * RG_SIN_PI_0 * (double)k / (double)plan->n_rings;
    const size_t n = 4 * (size_t)rg_pieces(arc, plan->step);
    return n < 8 ? 8 : n;
}

double rg_disc_n_facets(double n_rim, double n_rings, double step)
{
    double n = n_rim / 4.0;
    if (n_rings == 1.0) return n;
    if (n_rings > 1e4) return n + n_rings * (0.5 * RG_SIN_PI_0 / step + 4.0);
    const rg_disc_plan plan = {(size_t)n_rim, (size_t)n_rings, step};
    for (size_t k = 1; k < plan.n_rings; k++) n += 0.5 * (double)rg_disc_n_rim(&plan, k);
    return n;
}

/* Vertices of one quarter of a rim, n + 1 of them, or the centre alone. */
static rg_status quarter_of_rim(rg_soup *soup, int quarter, size_t n, double radius, rg_patch_at *at, const void *of, rg_error *err)
{
    rg_status status = RG_OK;
    for (size_t i = 0; i <= n && !status; i++) {
        double c = 0.0, s = 0.0;
        if (n) rg_cis_pi(0.5 * (quarter + (double)i / (double)n), &c, &s);
        status = add_vertex(soup, at(of, radius * c, radius * s), err);
    }
    return status;
}

/* Closes the band between two rims, always with the shorter step: the one whose middle comes first. */
static rg_status band(rg_soup *soup, uint32_t part, uint32_t inner, size_t n_inner, uint32_t outer, size_t n_outer, rg_error *err)
{
    rg_status status = RG_OK;
    for (size_t i = 0, o = 0; (i < n_inner || o < n_outer) && !status;) {
        const bool outward = o < n_outer && (i == n_inner || (2 * o + 1) * n_inner <= (2 * i + 1) * n_outer);
        const uint32_t a = inner + (uint32_t)i, b = outer + (uint32_t)o;
        status = outward ? rg_soup_facet(soup, a, b, b + 1, part, err) : rg_soup_facet(soup, a, b, a + 1, part, err);
        if (outward) o++;
        else i++;
    }
    return status;
}

rg_status rg_patch_disc(rg_soup *soup, uint32_t part, int first, int n, const rg_disc_plan *plan, rg_patch_at *at, const void *of,
                        rg_error *err)
{
    rg_status status = RG_OK;
    for (int quarter = first; quarter < first + n && !status; quarter++) {
        uint32_t inner = (uint32_t)soup->n_vertices;
        size_t n_inner = 0;
        status = quarter_of_rim(soup, quarter, 0, 0.0, at, of, err);
        for (size_t k = 1; k <= plan->n_rings && !status; k++) {
            const size_t n_outer = rg_disc_n_rim(plan, k) / 4;
            const uint32_t outer = (uint32_t)soup->n_vertices;
            status = quarter_of_rim(soup, quarter, n_outer, (double)k / (double)plan->n_rings, at, of, err);
            if (!status) status = band(soup, part, inner, n_inner, outer, n_outer, err);
            inner = outer;
            n_inner = n_outer;
        }
    }
    return status;
}

double rg_pieces(double length_m, double step_m) { return step_m > 0.0 ? fmax(1.0, ceil(length_m / step_m)) : 1.0; }

/* The shorter side first: when it needs no cut, the other one has nearly all of the edge. */
rg_cells rg_cells_of(double u_m, double v_m, double edge_m)
{
    if (!(edge_m > 0.0)) return (rg_cells){1.0, 1.0};
    if (v_m < u_m) {
        const rg_cells turned = rg_cells_of(v_m, u_m, edge_m);
        return (rg_cells){turned.n_v, turned.n_u};
    }
    const double n_u = rg_pieces(u_m, edge_m * sqrt(0.5)), cell_m = u_m / n_u;
    return (rg_cells){n_u, rg_pieces(v_m, sqrt(edge_m * edge_m - cell_m * cell_m))};
}

static double equal_area_radius(double radius_m, double n)
{
    double c, s;
    rg_cis_pi(2.0 / n, &c, &s);
    return radius_m * sqrt(2.0 * RG_SIN_PI_0 / n / s);
}

rg_circle rg_circle_of(double radius_m, double sagitta_m, double chord_m)
{
    double n = 8.0;
    /* Both starts are at or under the answer: acos(1 - x) <= sqrt(2x)/(1 - x), and of all shapes of one area the circle has the
     * shortest rim. */
    const double x = sagitta_m / radius_m;
    if (sagitta_m > 0.0 && x < 1.0) n = fmax(n, 4.0 * floor(0.25 * RG_SIN_PI_0 / sqrt(2.0 * x) * (1.0 - x)));
    if (chord_m > 0.0) n = fmax(n, 4.0 * floor(0.5 * RG_SIN_PI_0 * radius_m / chord_m));
    for (; n < N_LARGE; n += 4.0) {
        double c, s;
        const double r = equal_area_radius(radius_m, n);
        rg_cis_pi(0.5 / n, &c, &s);
        const double height_m = 2.0 * r * s * s;     /* 1 - cos x = 2 sin^2(x/2) */
        rg_cis_pi(1.0 / n, &c, &s);
        if ((sagitta_m == 0.0 || height_m <= sagitta_m) && (chord_m == 0.0 || 2.0 * r * s <= chord_m)) return (rg_circle){n, r};
    }
    return (rg_circle){fmin(n, N_LARGE * N_LARGE), radius_m};
}
