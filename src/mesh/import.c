/* import.c - a mesh from a file: which reader, which axes, and whose name stands before the message */
#include "base/digest.h"
#include "base/vec3.h"
#include "mesh/readers.h"
#include "mesh/repair.h"
#include <errno.h>
#include <fcntl.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>
#include <sys/stat.h>
#include <unistd.h>

static rg_status check_kind(const struct stat *info, rg_error *err)
{
    const char *what = S_ISDIR(info->st_mode) ? "a folder" : S_ISFIFO(info->st_mode) ? "a pipe" : S_ISSOCK(info->st_mode) ? "a socket" :
                       S_ISREG(info->st_mode) ? NULL : "a device";
    if (what) return rg_fail(err, RG_BAD_INPUT, "this is %s: a mesh is read from a plain file", what);
    return info->st_size ? RG_OK : rg_fail(err, RG_BAD_INPUT, "the file is empty");
}

static rg_status read_open(rg_file *file, int fd, rg_error *err)
{
    struct stat info;
    if (fstat(fd, &info)) return rg_fail(err, RG_BAD_INPUT, "%s", strerror(errno));
    rg_status status = check_kind(&info, err);
    if (status) return status;
    const size_t size = (size_t)info.st_size;
    char *text = malloc(size + 1);
    if (!text) return rg_fail(err, RG_NO_MEMORY, "no memory for its %zu bytes", size);
    size_t n = 0;
    while (n < size) {
        const ssize_t got = read(fd, text + n, size - n);
        if (got > 0) n += (size_t)got;
        else if (got == 0 || errno != EINTR) break;
    }
    if (n == size) {
        text[n] = 0;
        file->text = text;
        file->n = n;
        return RG_OK;
    }
    free(text);
    return rg_fail(err, RG_BAD_INPUT, "only %zu of its %zu bytes could be read", n, size);
}

/* Looks before it opens: to open a pipe or a device can already wait or do something. */
static rg_status read_file(rg_file *file, rg_error *err)
{
    struct stat info;
    if (stat(file->path, &info)) return rg_fail(err, RG_BAD_INPUT, "%s", strerror(errno));
    rg_status status = check_kind(&info, err);
    if (status) return status;
    const int fd = open(file->path, O_RDONLY | O_NONBLOCK | O_CLOEXEC);
    if (fd < 0) return rg_fail(err, RG_BAD_INPUT, "%s", strerror(errno));
    status = read_open(file, fd, err);
    close(fd);
    return status;
}

static rg_status digest(char hex[65], const rg_file *file, rg_error *err)
{
    rg_digest *sum = rg_digest_new();
    if (!sum) return rg_fail(err, RG_NO_MEMORY, "no memory for the file's digest");
    rg_digest_add(sum, file->text, file->n);
    rg_digest_end(sum, hex);
    return RG_OK;
}

static bool ends_in(const char *path, const char *ending)
{
    const size_t n = strlen(path), m = strlen(ending);
    return n >= m && strcasecmp(path + n - m, ending) == 0;
}

/* The content decides where it can; then the name's ending; then whatever Assimp finds. */
static rg_status read_facets(rg_soup *soup, rg_origin *origin, const rg_file *file, rg_error *err)
{
    const bool ply = rg_is_ply(file), stl = !ply && rg_is_stl(file);
    const bool named_obj = ends_in(file->path, ".obj"), named_stl = ends_in(file->path, ".stl"), named_ply = ends_in(file->path, ".ply");
    if (ply || stl || (named_obj && rg_is_obj(file))) {
        strcpy(origin->format, ply ? "PLY" : stl ? "STL" : "OBJ");
        return (ply ? rg_read_ply : stl ? rg_read_stl : rg_read_obj)(soup, file, err);
    }
    if (named_stl && file->n >= 5 && strncasecmp(file->text, "solid", 5) == 0) return rg_read_stl(soup, file, err);
    const bool own_name = named_obj || named_stl || named_ply;
    rg_error first = {""};
    rg_status status = own_name ? RG_BAD_INPUT : rg_read_apart(soup, origin, file, false, &first);
    if (status != RG_BAD_INPUT) {
        if (status && err) *err = first;
        return status;
    }
    /* Its name says something else than its content. */
    rg_soup_free(soup);
    if (rg_is_obj(file)) {
        strcpy(origin->format, "OBJ");
        return rg_read_obj(soup, file, err);
    }
    status = rg_read_apart(soup, origin, file, true, err);
    if (status != RG_BAD_INPUT) return status;
    rg_soup_free(soup);
    if (named_obj) return rg_read_obj(soup, file, err);
    if (named_stl) return rg_read_stl(soup, file, err);
    return named_ply ? rg_fail(err, RG_BAD_INPUT, "a PLY file begins with a line \"ply\", and this one does not") :
        rg_fail(err, RG_BAD_INPUT, "%s", first.text);
}

/* What is given comes before what the format says, and that before metres, +z and +x. */
static void settle_frame(rg_mesh_frame *frame, char assumed[256], const rg_mesh_frame *given, const rg_origin *origin)
{
    static const char *const axis[] = {"", "+x", "-x", "+y", "-y", "+z", "-z"};
    const rg_mesh_frame *own = &origin->own;
    *frame = (rg_mesh_frame){given && given->unit_m != 0.0 ? given->unit_m : own->unit_m != 0.0 ? own->unit_m : 1.0,
                             given && given->up ? given->up : own->up ? own->up : RG_PLUS_Z,
                             given && given->front ? given->front : own->front ? own->front : RG_PLUS_X};
    const bool known = frame->up <= RG_MINUS_Z && frame->front <= RG_MINUS_Z;
    snprintf(assumed, 256, "a unit is %g m (%s), up is %s (%s), front is %s (%s)", frame->unit_m,
             given && given->unit_m != 0.0 ? "given" : own->unit_m != 0.0 ? origin->unit_from : "assumed", known ? axis[frame->up] : "?",
             given && given->up ? "given" : own->up ? origin->axes_from : "assumed", known ? axis[frame->front] : "?",
             given && given->front ? "given" : own->front ? origin->axes_from : "assumed");
}

/* "NAME: text", with the end of a name that is too long, and nothing in it that a terminal would obey. */
static void put_name_before(rg_error *err, const char *path)
{
    rg_error said = *err;
    char name[161];
    const size_t length = strlen(path), from = length > 160 ? length - 160 : 0;
    for (size_t i = 0; i <= length - from; i++) {
        const unsigned char c = (unsigned char)path[from + i];
        name[i] = c && (c < 0x20 || c == 0x7f) ? '?' : (char)c;
    }
    rg_fail(err, RG_BAD_INPUT, "%s%s: %s", from ? "..." : "", name, said.text);
}

rg_status rg_mesh_read(rg_mesh **out, const char *path, const rg_mesh_frame *frame, rg_error *err)
{
    rg_file file = {.path = path};
    rg_soup soup = {0};
    rg_origin origin = {0};
    rg_mesh_report report = {0};
    rg_mesh_frame settled;
    rg_turn turn;
    rg_error why = {""};
    rg_status status = read_file(&file, &why);
    if (!status) status = digest(report.sha256, &file, &why);
    if (!status) status = read_facets(&soup, &origin, &file, &why);
    free((char *)file.text);
    if (!status) {
        settle_frame(&settled, report.assumed, frame, &origin);
        memcpy(report.format, origin.format, sizeof report.format);
        status = rg_turn_of(&turn, &settled, &why);
    }
    if (!status) status = rg_mesh_build(out, &soup, &turn, &report, &why);
    rg_soup_free(&soup);
    if (status != RG_OK && status != RG_BAD_VALUE) put_name_before(&why, path);
    if (status && err) *err = why;
    return status;
}
