/* apart.c - Assimp in a process of its own, so that a damaged file breaks that and not its caller
 *
 * Some of its readers follow an index past an array (COLLADA: an accessor of more numbers than its source has), ask for memory without
 * end, or print. The child hands its facets over through a pipe and nothing of it is believed unchecked.
 */
#include "mesh/readers.h"
#include <errno.h>
#include <fcntl.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/prctl.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

#define CPU_LIMIT_S 900                             /* of a reader that never ends */
#define MEMORY_BASE ((rlim_t)4 << 30)               /* bytes on top of what the process has already, */
#define MEMORY_PER_BYTE ((rlim_t)64)                /* and for each byte of the file */

typedef struct {
    rg_status status;
    rg_error err;
    rg_origin origin;
    size_t n_vertices, n_facets, n_parts, n_polygons_cut, n_not_facets;
    double coordinate_step;
} parcel;

static bool send_all(int fd, const void *from, size_t n)
{
    for (const char *at = from; n;) {
        const ssize_t sent = write(fd, at, n);
        if (sent < 0 && errno == EINTR) continue;
        if (sent <= 0) return false;
        at += sent;
        n -= (size_t)sent;
    }
    return true;
}

static bool receive_all(int fd, void *to, size_t n)
{
    for (char *at = to; n;) {
        const ssize_t got = read(fd, at, n);
        if (got < 0 && errno == EINTR) continue;
        if (got <= 0) return false;
        at += got;
        n -= (size_t)got;
    }
    return true;
}

/* A count that lies makes some readers fill all there is. */
static void limit_memory(size_t file_bytes)
{
    unsigned long pages = 0;
    FILE *statm = fopen("/proc/self/statm", "r");
    if (statm && fscanf(statm, "%lu", &pages) == 1) {
        struct rlimit limit;
        const rlim_t most = pages * (rlim_t)sysconf(_SC_PAGESIZE) + MEMORY_BASE + MEMORY_PER_BYTE * file_bytes;
        if (getrlimit(RLIMIT_AS, &limit) == 0 && most < limit.rlim_cur) {
            limit.rlim_cur = most;
            setrlimit(RLIMIT_AS, &limit);
        }
    }
    if (statm) fclose(statm);
}

/* Silent, first to go when memory runs out, and gone with its parent. */
static void settle_in_child(void)
{
    const int nowhere = open("/dev/null", O_RDWR), score = open("/proc/self/oom_score_adj", O_WRONLY);
    if (nowhere >= 0) {
        dup2(nowhere, STDOUT_FILENO);
        dup2(nowhere, STDERR_FILENO);
    }
    if (score >= 0) send_all(score, "1000", 4);
    const int usual[] = {SIGINT, SIGTERM, SIGHUP, SIGSEGV, SIGBUS, SIGABRT, SIGFPE, SIGILL, SIGPIPE};
    for (size_t i = 0; i < sizeof usual / sizeof usual[0]; i++) signal(usual[i], SIG_DFL);
    setrlimit(RLIMIT_CORE, &(struct rlimit){0, 0});
    setrlimit(RLIMIT_CPU, &(struct rlimit){CPU_LIMIT_S, CPU_LIMIT_S});
    prctl(PR_SET_PDEATHSIG, SIGKILL);
}

static void read_and_send(int fd, const rg_file *file, bool by_content)
{
    rg_soup soup = {0};
    parcel p = {0};
    p.status = rg_read_assimp(&soup, &p.origin, file, by_content, &p.err);
    p.n_vertices = soup.n_vertices, p.n_facets = soup.n_facets, p.n_parts = soup.n_parts;
    p.n_polygons_cut = soup.n_polygons_cut, p.n_not_facets = soup.n_not_facets, p.coordinate_step = soup.coordinate_step;
    bool sent = send_all(fd, &p, sizeof p);
    if (p.status) return;
    sent = sent && send_all(fd, soup.vertex, p.n_vertices * sizeof *soup.vertex);
    sent = sent && send_all(fd, soup.facet, p.n_facets * sizeof *soup.facet);
    sent = sent && send_all(fd, soup.part, p.n_facets * sizeof *soup.part);
    for (size_t i = 0; i < p.n_parts && sent; i++) {
        char name[RG_NAME_MAX] = "";
        strncpy(name, soup.part_name[i], sizeof name - 1);
        sent = send_all(fd, name, sizeof name);
    }
}

static bool is_sound(const rg_soup *soup)
{
    for (size_t f = 0; f < soup->n_facets; f++) {
        const uint32_t *c = soup->facet[f];
        if (c[0] >= soup->n_vertices || c[1] >= soup->n_vertices || c[2] >= soup->n_vertices || soup->part[f] >= soup->n_parts) return false;
    }
    return true;
}

static rg_status broke_down(rg_error *err)
{
    return rg_fail(err, RG_BAD_INPUT, "its reader broke down over it: the file is damaged or too large for this machine");
}

static rg_status receive(rg_soup *soup, rg_origin *origin, int fd, rg_error *err)
{
    parcel p;
    if (!receive_all(fd, &p, sizeof p)) return broke_down(err);
    p.err.text[sizeof p.err.text - 1] = 0;
    if (p.status != RG_OK && p.status != RG_BAD_INPUT && p.status != RG_NO_MEMORY) return broke_down(err);
    if (p.status) return rg_fail(err, p.status, "%s", p.err.text);
    rg_status status = rg_soup_reserve(soup, p.n_vertices, p.n_facets, err);
    if (status) return status;
    if (!receive_all(fd, soup->vertex, p.n_vertices * sizeof *soup->vertex) || !receive_all(fd, soup->facet, p.n_facets * sizeof *soup->facet) ||
        !receive_all(fd, soup->part, p.n_facets * sizeof *soup->part))
        return broke_down(err);
    for (size_t i = 0; i < p.n_parts && !status; i++) {
        char name[RG_NAME_MAX];
        uint32_t part;
        if (!receive_all(fd, name, sizeof name)) return broke_down(err);
        name[sizeof name - 1] = 0;
        status = rg_soup_part(soup, &part, name, strlen(name), err);
    }
    soup->n_vertices = p.n_vertices, soup->n_facets = p.n_facets;
    soup->n_polygons_cut = p.n_polygons_cut, soup->n_not_facets = p.n_not_facets, soup->coordinate_step = p.coordinate_step;
    *origin = p.origin;
    return status ? status : is_sound(soup) ? RG_OK : broke_down(err);
}

rg_status rg_read_apart(rg_soup *soup, rg_origin *origin, const rg_file *file, bool by_content, rg_error *err)
{
    int end[2];
    if (pipe2(end, O_CLOEXEC)) return rg_fail(err, RG_SYSTEM, "no pipe to a reader: %s", strerror(errno));
    const pid_t child = fork();
    if (child == 0) {
        settle_in_child();
        limit_memory(file->n);
        read_and_send(end[1], file, by_content);
        _exit(0);
    }
    close(end[1]);
    const rg_status status = child < 0 ? rg_fail(err, RG_SYSTEM, "no process for a reader: %s", strerror(errno)) :
        receive(soup, origin, end[0], err);
    close(end[0]);
    while (child > 0 && waitpid(child, NULL, 0) < 0 && errno == EINTR) {}
    return status;
}
