/* shells.c - which facets hang together, over which edges, and which way they face */
#include "base/sum.h"
#include "base/vec3.h"
#include "mesh/repair.h"
#include <assert.h>
#include <stdlib.h>
#include <string.h>

/* Every facet stands three times in here, once for each edge, under the edge's lower vertex: use[first[v]] .. use[first[v + 1] - 1] are
 * sorted by the other vertex (upper half of the word), then by facet (lower half). */
typedef struct {
    size_t *first;      /* [n_vertices + 1] */
    uint64_t *use;      /* [3 * n_facets] */
} edge_uses;

static uint32_t facet_of(uint64_t use) { return (uint32_t)use; }
static uint32_t high_of(uint64_t use) { return (uint32_t)(use >> 32); }

static int by_value(const void *a, const void *b)
{
    const uint64_t x = *(const uint64_t *)a, y = *(const uint64_t *)b;
    return (x > y) - (x < y);
}

static void sort_uses(uint64_t *use, size_t n)
{
    if (n > 32) {
        qsort(use, n, sizeof *use, by_value);
        return;
    }
    for (size_t i = 1; i < n; i++) {
        const uint64_t x = use[i];
        size_t j = i;
        for (; j > 0 && use[j - 1] > x; j--) use[j] = use[j - 1];
        use[j] = x;
    }
}

static bool list_uses(edge_uses *edges, const rg_mesh *mesh)
{
    edges->first = calloc(mesh->n_vertices + 2, sizeof *edges->first);
    edges->use = malloc(3 * mesh->n_facets * sizeof *edges->use);
    if (!edges->first || !edges->use) return false;
    size_t *const next = edges->first + 1;      /* while filling, next[v] runs from v's first use to its end */
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) {
            const uint32_t a = mesh->facet[f][i], b = mesh->facet[f][(i + 1) % 3];
            next[(a < b ? a : b) + 1]++;
        }
    for (size_t v = 0; v < mesh->n_vertices; v++) next[v + 1] += next[v];
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) {
            const uint32_t a = mesh->facet[f][i], b = mesh->facet[f][(i + 1) % 3];
            edges->use[next[a < b ? a : b]++] = (uint64_t)(a < b ? b : a) << 32 | f;
        }
    for (size_t v = 0; v < mesh->n_vertices; v++) sort_uses(edges->use + edges->first[v], edges->first[v + 1] - edges->first[v]);
    return true;
}

/* The corner of facet f at which its edge between a and b begins. */
static int edge_at(const rg_mesh *mesh, uint32_t f, uint32_t a, uint32_t b)
{
    const uint32_t *c = mesh->facet[f];
    for (int i = 0; i < 3; i++)
        if ((c[i] == a && c[(i + 1) % 3] == b) || (c[i] == b && c[(i + 1) % 3] == a)) return i;
    assert(!"an edge's facet has the edge");
    return 0;
}

static size_t uses_alike(const edge_uses *edges, size_t u, size_t end)
{
    size_t n = 1;
    while (u + n < end && high_of(edges->use[u + n]) == high_of(edges->use[u])) n++;
    return n;
}

static void link_neighbours(rg_mesh *mesh, const edge_uses *edges)
{
    mesh->report.n_boundary_edges = mesh->report.n_branch_edges = 0;
    for (uint32_t v = 0; v < mesh->n_vertices; v++)
        for (size_t u = edges->first[v], n; u < edges->first[v + 1]; u += n) {
            const uint32_t w = high_of(edges->use[u]);
            n = uses_alike(edges, u, edges->first[v + 1]);
            if (n == 1) mesh->report.n_boundary_edges++;
            if (n > 2) mesh->report.n_branch_edges++;
            for (size_t i = 0; i < n; i++) {
                const uint32_t f = facet_of(edges->use[u + i]);
                const uint32_t across = n == 1 ? RG_NO_FACET : n > 2 ? RG_MANY_FACETS : facet_of(edges->use[u + 1 - i]);
                mesh->neighbour[f][edge_at(mesh, f, v, w)] = across;
            }
        }
}

static void turn_facet(rg_mesh *mesh, uint32_t f)
{
    uint32_t *c = mesh->facet[f], *n = mesh->neighbour[f];
    const uint32_t corner = c[1], across = n[0];
    c[1] = c[2], c[2] = corner;
    n[0] = n[2], n[2] = across;
}

/* Whether facet f and the one across its edge i use that edge in one direction. Distinct facets share one edge at most. */
static bool runs_alike(const rg_mesh *mesh, uint32_t f, int i)
{
    const uint32_t g = mesh->neighbour[f][i], a = mesh->facet[f][i], b = mesh->facet[f][(i + 1) % 3];
    return mesh->facet[g][edge_at(mesh, g, a, b)] == a;
}

/* Floods the shell of facet seed; queue receives its facets. Against the seed's winding: flips[f]. Where the ways round a one-sided
 * shell disagree, the first wins. Returns how many facets the shell has. */
static size_t flood(rg_mesh *mesh, uint32_t seed, uint32_t shell, uint32_t queue[], bool flips[])
{
    size_t n = 0;
    queue[n++] = seed;
    mesh->shell[seed] = shell;
    flips[seed] = false;
    for (size_t done = 0; done < n; done++) {
        const uint32_t f = queue[done];
        for (int i = 0; i < 3; i++) {
            const uint32_t g = mesh->neighbour[f][i];
            if (g >= RG_MANY_FACETS || mesh->shell[g] != RG_NO_FACET) continue;
            mesh->shell[g] = shell;
            flips[g] = flips[f] != runs_alike(mesh, f, i);
            queue[n++] = g;
        }
    }
    return n;
}

/* The fewer turn, so that a shell with one odd facet stays what it was. Turning waits until all shells are known: runs_alike reads
 * the winding as it came. */
static void wind_shells(rg_mesh *mesh, uint32_t queue[], bool flips[])
{
    for (size_t f = 0; f < mesh->n_facets; f++) mesh->shell[f] = RG_NO_FACET;
    for (uint32_t f = 0; f < mesh->n_facets; f++) {
        if (mesh->shell[f] != RG_NO_FACET) continue;
        const size_t n = flood(mesh, f, (uint32_t)mesh->n_shells++, queue, flips);
        size_t n_flips = 0;
        for (size_t i = 0; i < n; i++) n_flips += flips[queue[i]];
        if (2 * n_flips > n)
            for (size_t i = 0; i < n; i++) flips[queue[i]] = !flips[queue[i]];
        mesh->report.n_facets_turned += 2 * n_flips > n ? n - n_flips : n_flips;
    }
    for (uint32_t f = 0; f < mesh->n_facets; f++)
        if (flips[f]) turn_facet(mesh, f);
}

static bool runs_up(const rg_mesh *mesh, uint32_t f, uint32_t low, uint32_t high)
{
    return mesh->facet[f][edge_at(mesh, f, low, high)] == low;
}

/* A shell is open when one of its edges is used more often in one direction than in the other. Sorts the uses of branch edges by
 * shell, so edges are good for nothing else afterwards. */
static void find_closed(rg_mesh *mesh, edge_uses *edges)
{
    for (size_t s = 0; s < mesh->n_shells; s++) mesh->shells[s].closed = true;
    for (size_t f = 0; f < mesh->n_facets; f++) mesh->shells[mesh->shell[f]].n_facets++;
    for (uint32_t v = 0; v < mesh->n_vertices; v++)
        for (size_t u = edges->first[v], n; u < edges->first[v + 1]; u += n) {
            const uint32_t w = high_of(edges->use[u]);
            n = uses_alike(edges, u, edges->first[v + 1]);
            for (size_t i = u; i < u + n; i++)
                edges->use[i] = (uint64_t)mesh->shell[facet_of(edges->use[i])] << 32 | facet_of(edges->use[i]);
            sort_uses(edges->use + u, n);
            for (size_t i = u, m; i < u + n; i += m) {
                ptrdiff_t ups = 0;
                m = uses_alike(edges, i, u + n);
                for (size_t j = i; j < i + m; j++) ups += runs_up(mesh, facet_of(edges->use[j]), v, w) ? 1 : -1;
                if (ups) mesh->shells[high_of(edges->use[i])].closed = false;
            }
        }
}

/* Volume of the tetrahedra from a corner of the shell to its facets: negative when they face inward. */
static rg_status turn_outside_out(rg_mesh *mesh, rg_error *err)
{
    rg_sum *six_volumes = calloc(mesh->n_shells, sizeof *six_volumes);
    uint32_t *tip = malloc(mesh->n_shells * sizeof *tip);
    rg_status status = six_volumes && tip ? RG_OK : rg_fail(err, RG_NO_MEMORY, "no memory for %zu shells", mesh->n_shells);
    if (status) goto done;
    memset(tip, 0xff, mesh->n_shells * sizeof *tip);
    for (size_t f = 0; f < mesh->n_facets; f++) {
        const uint32_t s = mesh->shell[f], *c = mesh->facet[f];
        if (tip[s] == RG_NO_FACET) tip[s] = c[0];
        const vec3 o = vec3_from(mesh->vertex_m[tip[s]]), a = vec3_sub(vec3_from(mesh->vertex_m[c[0]]), o);
        const vec3 b = vec3_sub(vec3_from(mesh->vertex_m[c[1]]), o), d = vec3_sub(vec3_from(mesh->vertex_m[c[2]]), o);
        rg_sum_add(&six_volumes[s], vec3_dot(a, vec3_cross(b, d)));
    }
    for (size_t s = 0; s < mesh->n_shells; s++) {
        mesh->report.n_closed_shells += mesh->shells[s].closed;
        mesh->report.n_shells_turned += mesh->shells[s].closed && rg_sum_value(&six_volumes[s]) < 0.0;
    }
    for (uint32_t f = 0; f < mesh->n_facets; f++) {
        const uint32_t s = mesh->shell[f];
        if (mesh->shells[s].closed && rg_sum_value(&six_volumes[s]) < 0.0) turn_facet(mesh, f);
    }
done:
    free(six_volumes);
    free(tip);
    return status;
}

rg_status rg_find_shells(rg_mesh *mesh, rg_error *err)
{
    const size_t n = mesh->n_facets;
    edge_uses edges = {0};
    bool *flips = NULL;
    uint32_t *queue = NULL;
    rg_status status = RG_NO_MEMORY;
    mesh->neighbour = malloc(n * sizeof *mesh->neighbour);
    mesh->shell = malloc(n * sizeof *mesh->shell);
    if (!mesh->neighbour || !mesh->shell || !list_uses(&edges, mesh)) goto done;
    link_neighbours(mesh, &edges);
    queue = malloc(n * sizeof *queue);
    flips = malloc(n * sizeof *flips);
    if (!queue || !flips) goto done;
    wind_shells(mesh, queue, flips);
    mesh->shells = calloc(mesh->n_shells, sizeof *mesh->shells);
    if (!mesh->shells) goto done;
    find_closed(mesh, &edges);
    mesh->report.n_shells = mesh->n_shells;
    status = turn_outside_out(mesh, err);
done:
    free(edges.first);
    free(edges.use);
    free(queue);
    free(flips);
    return status == RG_NO_MEMORY ? rg_fail(err, RG_NO_MEMORY, "no memory to find the edges of %zu facets", n) : status;
}
