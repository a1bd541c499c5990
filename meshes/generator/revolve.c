/* revolve.c - a profile turned about an axis */
#include "revolve.h"

int revolve_segments(double radius_m, double sagitta_m)
{
    const double half_turn = 4.0 * atan(1.0);
    return 4 * (int)ceil(half_turn / acos(1.0 - sagitta_m / radius_m) / 4.0);
}

static uint32_t ring(facets *mesh, profile_point p, int n_segments)
{
    const uint32_t first = (uint32_t)mesh->n_vertices;
    for (int i = 0; i < (p.r_m > 0.0 ? n_segments : 1); i++) {
        const double angle = 8.0 * atan(1.0) * i / n_segments;
        facets_vertex(mesh, (vec3){p.r_m * cos(angle), p.along_m, p.r_m * sin(angle)});
    }
    return first;
}

void revolve(facets *mesh, size_t n, const profile_point profile[], int n_segments, uint32_t part)
{
    uint32_t before = ring(mesh, profile[0], n_segments);
    for (size_t k = 1; k < n; k++) {
        const uint32_t now = ring(mesh, profile[k], n_segments);
        for (uint32_t i = 0; i < (uint32_t)n_segments; i++) {
            const uint32_t j = (i + 1) % (uint32_t)n_segments;
            if (profile[k - 1].r_m > 0.0 && profile[k].r_m > 0.0) facets_quad(mesh, before + j, before + i, now + i, now + j, part);
            else if (profile[k].r_m > 0.0) facets_triangle(mesh, before, now + i, now + j, part);
            else facets_triangle(mesh, before + j, before + i, now, part);
        }
        before = now;
    }
}
