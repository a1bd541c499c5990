/* import_files.h - mesh files that a test writes into a folder of its own, and reads back */
#ifndef RG_TESTS_IMPORT_FILES_H
#define RG_TESTS_IMPORT_FILES_H
#include "mesh/mesh.h"
#include "run.h"
#include <math.h>
#include <stdio.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

/* What Assimp itself leaks when a file is damaged is not ours to mend. */
const char *__lsan_default_suppressions(void);
const char *__lsan_default_suppressions(void) { return "leak:libassimp"; }

static char test_folder[64];
static char test_path[160];     /* of the file written last */

static inline void make_folder(void)
{
    strcpy(test_folder, "/tmp/rg-import-XXXXXX");
    ck_assert_ptr_nonnull(mkdtemp(test_folder));
}

static inline void drop_folder(void)
{
    char command[96];
    snprintf(command, sizeof command, "rm -r %s", test_folder);
    ck_assert_int_eq(system(command), 0);
}

static inline const char *write_bytes(const char *name, const void *bytes, size_t n)
{
    snprintf(test_path, sizeof test_path, "%s/%s", test_folder, name);
    FILE *file = fopen(test_path, "wb");
    ck_assert_ptr_nonnull(file);
    ck_assert_uint_eq(fwrite(bytes, 1, n, file), n);
    ck_assert_int_eq(fclose(file), 0);
    return test_path;
}

static inline const char *write_text(const char *name, const char *text) { return write_bytes(name, text, strlen(text)); }

/* Reads a file that is a good mesh. */
static inline rg_mesh *read_good(const char *path, const rg_mesh_frame *frame)
{
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    const rg_status status = rg_mesh_read(&mesh, path, frame, &err);
    ck_assert_msg(status == RG_OK, "%s", err.text);
    ck_assert_msg(rg_mesh_check(mesh, &err) == RG_OK, "%s: %s", path, err.text);
    return mesh;
}

/* Reads a file that must be refused, with a text that names the file and contains says. */
static inline void read_bad(const char *path, const char *says)
{
    rg_mesh *mesh = (rg_mesh *)test_path;
    rg_error err = {""};
    const rg_status status = rg_mesh_read(&mesh, path, NULL, &err);
    ck_assert_msg(status == RG_BAD_INPUT, "%s: status %d", path, status);
    ck_assert_ptr_eq(mesh, (rg_mesh *)test_path);
    ck_assert_msg(strstr(err.text, says) != NULL, "\"%s\" does not say \"%s\"", err.text, says);
    ck_assert_msg(strncmp(err.text, path, strlen(path)) == 0, "\"%s\" does not name %s", err.text, path);
}

/* Reads whatever it is: a mesh that checks out, or a refusal with a reason. */
static inline rg_status read_any(const char *path)
{
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    const rg_status status = rg_mesh_read(&mesh, path, NULL, &err);
    ck_assert_msg(status == RG_OK || (status == RG_BAD_INPUT && err.text[0]), "%s: status %d, \"%s\"", path, status, err.text);
    if (status == RG_OK) ck_assert_msg(rg_mesh_check(mesh, &err) == RG_OK, "%s: %s", path, err.text);
    rg_mesh_free(mesh);
    return status;
}

/* Where corner i of facet f is, counted from the user's zero. */
static inline double corner_m(const rg_mesh *mesh, size_t f, size_t i, int axis)
{
    return mesh->origin_m[axis] + mesh->vertex_m[mesh->facet[f][i]][axis];
}

static inline void assert_corner(const rg_mesh *mesh, size_t f, size_t i, double x, double y, double z, double tol_m)
{
    const double got[] = {corner_m(mesh, f, i, 0), corner_m(mesh, f, i, 1), corner_m(mesh, f, i, 2)};
    ck_assert_msg(fabs(got[0] - x) <= tol_m && fabs(got[1] - y) <= tol_m && fabs(got[2] - z) <= tol_m,
                  "facet %zu corner %zu is (%.12g, %.12g, %.12g), want (%.12g, %.12g, %.12g)", f, i, got[0], got[1], got[2], x, y, z);
}

#endif
