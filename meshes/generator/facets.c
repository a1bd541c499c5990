/* facets.c - a growing triangle mesh with named parts, as the generator's steps build it up */
#include "facets.h"
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

void *grow_array(void *array, size_t *room, size_t n, size_t size)
{
    if (n <= *room) return array;
    *room = n + n / 2 + 64;
    array = realloc(array, *room * size);
    if (!array) {
        fprintf(stderr, "generator: no memory for %zu entries\n", n);
        exit(EXIT_FAILURE);
    }
    return array;
}

uint32_t facets_part(facets *mesh, const char *name)
{
    for (uint32_t p = 0; p < mesh->n_parts; p++)
        if (strcmp(mesh->part_name[p], name) == 0) return p;
    if (mesh->n_parts == MAX_PARTS) {
        fprintf(stderr, "generator: more than %d parts\n", MAX_PARTS);
        exit(EXIT_FAILURE);
    }
    snprintf(mesh->part_name[mesh->n_parts], PART_NAME, "%s", name);
    return (uint32_t)mesh->n_parts++;
}

uint32_t facets_vertex(facets *mesh, vec3 p)
{
    mesh->vertex_m = grow_array(mesh->vertex_m, &mesh->room_vertices, mesh->n_vertices + 1, sizeof *mesh->vertex_m);
    mesh->vertex_m[mesh->n_vertices] = p;
    return (uint32_t)mesh->n_vertices++;
}

void facets_triangle(facets *mesh, uint32_t a, uint32_t b, uint32_t c, uint32_t part)
{
    mesh->facet = grow_array(mesh->facet, &mesh->room_facets, mesh->n_facets + 1, sizeof *mesh->facet);
    mesh->facet[mesh->n_facets++] = (facet){{a, b, c}, part};
}

void facets_quad(facets *mesh, uint32_t a, uint32_t b, uint32_t c, uint32_t d, uint32_t part)
{
    const vec3 *v = mesh->vertex_m;
    if (vec3_norm(vec3_sub(v[a], v[c])) <= vec3_norm(vec3_sub(v[b], v[d]))) {
        facets_triangle(mesh, a, b, c, part);
        facets_triangle(mesh, a, c, d, part);
    } else {
        facets_triangle(mesh, a, b, d, part);
        facets_triangle(mesh, b, c, d, part);
    }
}

void facets_grid(facets *mesh, uint32_t first, size_t n_rows, size_t n_columns, uint32_t part)
{
    for (size_t i = 0; i + 1 < n_rows; i++) {
        for (size_t j = 0; j + 1 < n_columns; j++) {
            const uint32_t a = first + (uint32_t)(i * n_columns + j), b = a + (uint32_t)n_columns;
            facets_quad(mesh, a, b, b + 1, a + 1, part);
        }
    }
}

void facets_remove_part(facets *mesh, uint32_t part)
{
    size_t n = 0;
    for (size_t i = 0; i < mesh->n_facets; i++)
        if (mesh->facet[i].part != part) mesh->facet[n++] = mesh->facet[i];
    mesh->n_facets = n;
}

void facets_add(facets *mesh, const facets *other, vec3 shift_m)
{
    const uint32_t first = (uint32_t)mesh->n_vertices;
    for (size_t i = 0; i < other->n_vertices; i++) facets_vertex(mesh, vec3_add(other->vertex_m[i], shift_m));
    for (size_t i = 0; i < other->n_facets; i++) {
        const facet *f = &other->facet[i];
        facets_triangle(mesh, first + f->v[0], first + f->v[1], first + f->v[2], facets_part(mesh, other->part_name[f->part]));
    }
}

static uint32_t mirror_part(facets *mesh, uint32_t part)
{
    static const char left[] = "_left";
    char name[PART_NAME + 8];
    snprintf(name, sizeof name, "%s", mesh->part_name[part]);
    const size_t n = strlen(name), n_left = sizeof left - 1;
    if (n <= n_left || strcmp(name + n - n_left, left) != 0) return part;
    snprintf(name + n - n_left, sizeof name - (n - n_left), "_right");
    return facets_part(mesh, name);
}

void facets_mirror_y(facets *mesh)
{
    const size_t n_facets = mesh->n_facets;
    const uint32_t n_vertices = (uint32_t)mesh->n_vertices;
    for (uint32_t i = 0; i < n_vertices; i++) {
        const vec3 p = mesh->vertex_m[i];
        facets_vertex(mesh, (vec3){p.x, -p.y, p.z});
    }
    for (size_t i = 0; i < n_facets; i++) {
        const facet f = mesh->facet[i];
        facets_triangle(mesh, n_vertices + f.v[0], n_vertices + f.v[2], n_vertices + f.v[1], mirror_part(mesh, f.part));
    }
}

/* A vertex as it will stand in the file: whole micrometres, so that equality needs no tolerance. */
typedef struct { int64_t x, y, z; uint32_t index; } grid_point;

static int by_place(const void *left, const void *right)
{
    const grid_point *a = left, *b = right;
    if (a->x != b->x) return a->x < b->x ? -1 : 1;
    if (a->y != b->y) return a->y < b->y ? -1 : 1;
    if (a->z != b->z) return a->z < b->z ? -1 : 1;
    return (a->index > b->index) - (a->index < b->index);
}

static int same_place(const grid_point *a, const grid_point *b) { return a->x == b->x && a->y == b->y && a->z == b->z; }

void facets_weld(facets *mesh)
{
    const size_t n = mesh->n_vertices;
    size_t room_points = 0, room_first = 0, room_new = 0;
    grid_point *point = grow_array(NULL, &room_points, n, sizeof *point);
    uint32_t *first = grow_array(NULL, &room_first, n, sizeof *first);      /* the lowest vertex in the same place */
    uint32_t *new_index = grow_array(NULL, &room_new, n, sizeof *new_index);
    for (size_t i = 0; i < n; i++) {
        const vec3 p = mesh->vertex_m[i];
        point[i] = (grid_point){llround(p.x * 1e6), llround(p.y * 1e6), llround(p.z * 1e6), (uint32_t)i};
        new_index[i] = UINT32_MAX;
    }
    qsort(point, n, sizeof *point, by_place);
    for (size_t i = 0, run = 0; i < n; i++) {
        if (!same_place(&point[i], &point[run])) run = i;
        first[point[i].index] = point[run].index;
    }
    size_t n_facets = 0;
    for (size_t i = 0; i < mesh->n_facets; i++) {
        facet f = mesh->facet[i];
        for (int c = 0; c < 3; c++) f.v[c] = first[f.v[c]];
        if (f.v[0] == f.v[1] || f.v[1] == f.v[2] || f.v[2] == f.v[0]) continue;
        for (int c = 0; c < 3; c++) new_index[f.v[c]] = 0;
        mesh->facet[n_facets++] = f;
    }
    mesh->n_facets = n_facets;
    uint32_t n_kept = 0;
    for (size_t i = 0; i < n; i++) {
        if (new_index[i] == UINT32_MAX) continue;
        mesh->vertex_m[n_kept] = mesh->vertex_m[i];
        new_index[i] = n_kept++;
    }
    mesh->n_vertices = n_kept;
    for (size_t i = 0; i < n_facets; i++)
        for (int c = 0; c < 3; c++) mesh->facet[i].v[c] = new_index[mesh->facet[i].v[c]];
    free(point);
    free(first);
    free(new_index);
}

/* Never "-0.000000": the file should not depend on the sign of a zero. */
static double printable(double x) { return fabs(x) < 0.5e-6 ? 0.0 : x; }

int facets_write_obj(const facets *mesh, const char *path, const char *title)
{
    FILE *out = fopen(path, "w");
    if (!out) return -1;
    fprintf(out, "# %s\n# An invented shape. Metres; x forward, y left, z up; the ground is z = 0.\n", title);
    for (size_t i = 0; i < mesh->n_vertices; i++) {
        const vec3 p = mesh->vertex_m[i];
        fprintf(out, "v %.6f %.6f %.6f\n", printable(p.x), printable(p.y), printable(p.z));
    }
    for (uint32_t part = 0; part < mesh->n_parts; part++) {
        size_t n = 0;
        for (size_t i = 0; i < mesh->n_facets; i++) {
            const facet *f = &mesh->facet[i];
            if (f->part != part) continue;
            if (n++ == 0) fprintf(out, "g %s\n", mesh->part_name[part]);
            fprintf(out, "f %u %u %u\n", f->v[0] + 1, f->v[1] + 1, f->v[2] + 1);
        }
    }
    const int bad = ferror(out);
    return fclose(out) || bad ? -1 : 0;
}

void facets_free(facets *mesh)
{
    free(mesh->vertex_m);
    free(mesh->facet);
    *mesh = (facets){0};
}
