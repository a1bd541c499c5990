/* write.c - a mesh into a file: binary STL, OBJ text, binary PLY
 *
 * Coordinates are written where the user put them. Parts come one after the other, as the mesh holds them.
 */
#include "base/out_file.h"
#include "base/vec3.h"
#include "mesh/mesh.h"
#include <locale.h>
#include <roadglint/shape.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

/* Bytes of the next records, little endian whatever the machine is. A full stream is found out when the file is closed. */
typedef struct {
    FILE *out;
    size_t n;
    unsigned char bytes[4096];
} record;

static void put_whole(record *r, uint64_t value, size_t n_bytes)
{
    if (r->n + n_bytes > sizeof r->bytes) {
        fwrite(r->bytes, 1, r->n, r->out);
        r->n = 0;
    }
    for (size_t i = 0; i < n_bytes; i++) r->bytes[r->n++] = (unsigned char)(value >> 8 * i);
}

static void put_single(record *r, float value)
{
    uint32_t bits;
    memcpy(&bits, &value, sizeof bits);
    put_whole(r, bits, sizeof bits);
}

static void put_double(record *r, double value)
{
    uint64_t bits;
    memcpy(&bits, &value, sizeof bits);
    put_whole(r, bits, sizeof bits);
}

static void put_rest(record *r) { fwrite(r->bytes, 1, r->n, r->out); }

/* Where the user put it. */
static vec3 place(const rg_mesh *mesh, size_t vertex) { return vec3_add(vec3_from(mesh->origin_m), vec3_from(mesh->vertex_m[vertex])); }

/* Names are lines in both formats that have them; a caller's name may hold what would break one. */
static void put_name(FILE *out, const char *name)
{
    for (; *name; name++) fputc((unsigned char)*name < 0x20 || *name == 0x7f ? '_' : *name, out);
    fputc('\n', out);
}

/* --- STL: single precision, no shared vertices, no parts --- */

static vec3 in_single(vec3 a) { return (vec3){(float)a.x, (float)a.y, (float)a.z}; }

static vec3 twice_area(vec3 a, vec3 b, vec3 c) { return vec3_cross(vec3_sub(b, a), vec3_sub(c, a)); }

/* Far from zero single precision moves corners into one place or line. A facet that it turns by 60 degrees or more is none any longer. */
static rg_status check_single(const rg_mesh *mesh, rg_error *err)
{
    for (size_t f = 0; f < mesh->n_facets; f++) {
        const uint32_t *c = mesh->facet[f];
        const vec3 p[] = {place(mesh, c[0]), place(mesh, c[1]), place(mesh, c[2])};
        const vec3 n = twice_area(p[0], p[1], p[2]), rounded = twice_area(in_single(p[0]), in_single(p[1]), in_single(p[2]));
        if (!(vec3_dot(n, rounded) > 0.5 * vec3_norm(n) * vec3_norm(rounded)))
            return rg_fail(err, RG_BAD_VALUE, "the facet at (%.9g, %.9g, %.9g) is too small for the single precision of STL: write .ply or "
                           ".obj", p[0].x, p[0].y, p[0].z);
    }
    return RG_OK;
}

static rg_status write_stl(const rg_mesh *mesh, FILE *out, rg_error *err)
{
    char head[80] = "binary STL by roadglint " ROADGLINT_VERSION ", metres, x forward, y left, z up";
    record r = {.out = out};
    const rg_status status = check_single(mesh, err);
    if (status) return status;
    fwrite(head, 1, sizeof head, out);
    put_whole(&r, mesh->n_facets, 4);
    for (size_t f = 0; f < mesh->n_facets; f++) {
        vec3 p[4];
        for (int i = 0; i < 3; i++) p[i + 1] = place(mesh, mesh->facet[f][i]);
        const vec3 normal = twice_area(p[1], p[2], p[3]);
        p[0] = vec3_scale(normal, 1.0 / vec3_norm(normal));
        for (int i = 0; i < 4; i++) {
            put_single(&r, (float)p[i].x);
            put_single(&r, (float)p[i].y);
            put_single(&r, (float)p[i].z);
        }
        put_whole(&r, 0, 2);
    }
    put_rest(&r);
    return RG_OK;
}

/* --- OBJ: the shortest of 15 and 17 digits that gives the same double back --- */

static void put_number(FILE *out, double value)
{
    char text[32];
    snprintf(text, sizeof text, "%.15g", value);
    if (strtod(text, NULL) != value) snprintf(text, sizeof text, "%.17g", value);
    fputc(' ', out);
    fputs(text, out);
}

static rg_status write_obj(const rg_mesh *mesh, FILE *out, rg_error *err)
{
    const locale_t plain = newlocale(LC_ALL_MASK, "C", (locale_t)0);     /* '.' is the decimal point whatever the caller's locale is */
    if (!plain) return rg_fail(err, RG_NO_MEMORY, "no memory for a locale");
    const locale_t before = uselocale(plain);
    fputs("# OBJ by roadglint " ROADGLINT_VERSION ", metres, x forward, y left, z up\n", out);
    for (size_t v = 0; v < mesh->n_vertices; v++) {
        const vec3 p = place(mesh, v);
        fputc('v', out);
        put_number(out, p.x);
        put_number(out, p.y);
        put_number(out, p.z);
        fputc('\n', out);
    }
    for (size_t part = 0; part < mesh->n_parts; part++) {
        if (mesh->part_first[part] == mesh->part_first[part + 1]) continue;
        fputs("g ", out);
        put_name(out, mesh->part_name[part]);
        for (size_t f = mesh->part_first[part]; f < mesh->part_first[part + 1]; f++)
            fprintf(out, "f %u %u %u\n", mesh->facet[f][0] + 1u, mesh->facet[f][1] + 1u, mesh->facet[f][2] + 1u);
    }
    uselocale(before);
    freelocale(plain);
    return RG_OK;
}

/* --- PLY: doubles, and the part of each face as a property whose names stand in the head --- */

static rg_status write_ply(const rg_mesh *mesh, FILE *out, rg_error *err)
{
    (void)err;
    const char *index = mesh->n_vertices > (size_t)INT32_MAX ? "uint" : "int";
    const bool few_parts = mesh->n_parts <= 256;
    record r = {.out = out};
    fputs("ply\nformat binary_little_endian 1.0\ncomment by roadglint " ROADGLINT_VERSION ", metres, x forward, y left, z up\n", out);
    for (size_t part = 0; part < mesh->n_parts; part++) {
        fprintf(out, "comment part %zu ", part);
        put_name(out, mesh->part_name[part]);
    }
    fprintf(out, "element vertex %zu\nproperty double x\nproperty double y\nproperty double z\n", mesh->n_vertices);
    fprintf(out, "element face %zu\nproperty list uchar %s vertex_indices\nproperty %s part\nend_header\n", mesh->n_facets, index,
            few_parts ? "uchar" : "int");
    for (size_t v = 0; v < mesh->n_vertices; v++) {
        const vec3 p = place(mesh, v);
        put_double(&r, p.x);
        put_double(&r, p.y);
        put_double(&r, p.z);
    }
    for (size_t f = 0; f < mesh->n_facets; f++) {
        put_whole(&r, 3, 1);
        for (int i = 0; i < 3; i++) put_whole(&r, mesh->facet[f][i], 4);
        put_whole(&r, mesh->part[f], few_parts ? 1 : 4);
    }
    put_rest(&r);
    return RG_OK;
}

typedef rg_status write_fn(const rg_mesh *mesh, FILE *out, rg_error *err);

static write_fn *format_of(const char *path)
{
    static const struct { const char *ending; write_fn *write; } formats[] = {{".stl", write_stl}, {".obj", write_obj}, {".ply", write_ply}};
    const char *ending = strrchr(path, '.');
    for (size_t i = 0; ending && i < sizeof formats / sizeof formats[0]; i++)
        if (strcasecmp(ending, formats[i].ending) == 0) return formats[i].write;
    return NULL;
}

rg_status rg_mesh_can_write(const char *path, rg_error *err)
{
    if (format_of(path)) return RG_OK;
    return rg_fail(err, RG_BAD_VALUE, "%s: a mesh is written as .stl, .obj or .ply: end the name with one of them", path);
}

rg_status rg_mesh_write(const rg_mesh *mesh, const char *path, rg_error *err)
{
    rg_out_file *file = NULL;
    rg_status status = rg_mesh_can_write(path, err);
    if (!status) status = rg_out_file_open(&file, path, err);
    if (status) return status;
    status = format_of(path)(mesh, rg_out_file_stream(file), err);
    if (!status) return rg_out_file_keep(file, err);
    rg_out_file_drop(file);
    return status;
}
