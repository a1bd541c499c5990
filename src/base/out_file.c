/* out_file.c - a file that appears under its name only when it is complete */
#include "base/out_file.h"
#include <errno.h>
#include <fcntl.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

struct rg_out_file {
    FILE *stream;
    char *path, *temporary;         /* NULL for standard output */
};

static rg_status cannot_write(rg_error *err, const char *path)
{
    return rg_fail(err, RG_SYSTEM, "%s cannot be written: %s", path, errno == ENOENT ? "its folder is not there" : strerror(errno));
}

/* An earlier write failed and later ones did not; its errno is long gone. */
static rg_status lost_some(rg_error *err, const char *path)
{
    return rg_fail(err, RG_SYSTEM, "%s cannot be written: the system refused a part of it", path);
}

/* The mode that a file of fopen would have had. */
static mode_t usual_mode(void)
{
    const mode_t mask = umask(0);
    umask(mask);
    return 0666 & ~mask;
}

static FILE *open_temporary(char *name)
{
    const int fd = mkstemp(name);
    if (fd < 0) return NULL;
    FILE *stream = fchmod(fd, usual_mode()) == 0 ? fdopen(fd, "wb") : NULL;
    if (!stream) {
        const int why = errno;
        close(fd);
        unlink(name);
        errno = why;
    }
    return stream;
}

rg_status rg_out_file_open(rg_out_file **out, const char *path, rg_error *err)
{
    struct stat there;
    rg_out_file *file = calloc(1, sizeof *file);
    if (!file) return rg_fail(err, RG_NO_MEMORY, "no memory to open a file");
    if (!path || strcmp(path, "-") == 0) {
        file->stream = stdout;
        *out = file;
        return RG_OK;
    }
    if (stat(path, &there) == 0 && S_ISDIR(there.st_mode)) {
        free(file);
        return rg_fail(err, RG_SYSTEM, "%s is a folder: name a file in it", path);
    }
    file->path = strdup(path);
    file->temporary = malloc(strlen(path) + sizeof ".XXXXXX");
    rg_status status = RG_OK;
    if (!file->path || !file->temporary) {
        status = rg_fail(err, RG_NO_MEMORY, "no memory to open %s", path);
    } else {
        strcat(strcpy(file->temporary, path), ".XXXXXX");
        file->stream = open_temporary(file->temporary);
        if (!file->stream) status = cannot_write(err, path);
    }
    if (status) {
        free(file->path);
        free(file->temporary);
        free(file);
    } else {
        *out = file;
    }
    return status;
}

FILE *rg_out_file_stream(rg_out_file *file) { return file->stream; }

/* The new name itself must survive a loss of power. */
static void sync_folder_of(const char *path)
{
    char *folder = strdup(path);
    if (!folder) return;
    char *slash = strrchr(folder, '/');
    if (slash) slash[slash == folder] = 0;
    const int fd = open(slash ? folder : ".", O_RDONLY | O_DIRECTORY);
    if (fd >= 0) {
        fsync(fd);
        close(fd);
    }
    free(folder);
}

rg_status rg_out_file_keep(rg_out_file *file, rg_error *err)
{
    rg_status status = RG_OK;
    if (!file->path) {
        if (fflush(file->stream) != 0) status = cannot_write(err, "standard output");
        else if (ferror(file->stream)) status = lost_some(err, "standard output");
        free(file);
        return status;
    }
    if (fflush(file->stream) != 0 || fsync(fileno(file->stream)) != 0) status = cannot_write(err, file->path);
    else if (ferror(file->stream)) status = lost_some(err, file->path);
    if (fclose(file->stream) != 0 && !status) status = cannot_write(err, file->path);
    if (!status && rename(file->temporary, file->path) != 0) status = cannot_write(err, file->path);
    if (status) unlink(file->temporary);
    else sync_folder_of(file->path);
    free(file->path);
    free(file->temporary);
    free(file);
    return status;
}

void rg_out_file_drop(rg_out_file *file)
{
    if (!file) return;
    if (file->path) {
        fclose(file->stream);
        unlink(file->temporary);
    }
    free(file->path);
    free(file->temporary);
    free(file);
}
