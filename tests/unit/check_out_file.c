/* check_out_file.c - a file is there when it is complete, and until then what was there before */
#include "base/out_file.h"
#include "run.h"
#include <dirent.h>
#include <fcntl.h>
#include <signal.h>
#include <stdio.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

static char folder[64], path[128];

static void make_folder(void)
{
    strcpy(folder, "/tmp/check_out_file.XXXXXX");
    ck_assert_ptr_nonnull(mkdtemp(folder));
    snprintf(path, sizeof path, "%s/table.csv", folder);
}

static int n_files(void)
{
    DIR *dir = opendir(folder);
    int n = 0;
    while (readdir(dir)) n++;
    closedir(dir);
    return n - 2;                                           /* . and .. */
}

static void remove_folder(void)
{
    unlink(path);
    ck_assert_msg(rmdir(folder) == 0, "%s: something was left in it", folder);
}

static void put(const char *name, const char *text)
{
    FILE *f = fopen(name, "w");
    ck_assert_ptr_nonnull(f);
    ck_assert(fputs(text, f) >= 0 && fclose(f) == 0);
}

static void holds(const char *name, const char *want)
{
    char got[64] = "";
    FILE *f = fopen(name, "r");
    ck_assert_ptr_nonnull(f);
    ck_assert_uint_eq(fread(got, 1, sizeof got - 1, f), strlen(want));
    fclose(f);
    ck_assert_str_eq(got, want);
}

static rg_out_file *opened(void)
{
    rg_out_file *file = NULL;
    rg_error err = {{0}};
    ck_assert_msg(rg_out_file_open(&file, path, &err) == RG_OK, "%s", err.text);
    return file;
}

START_TEST(appears_when_kept)
{
    rg_out_file *file = opened();
    fputs("new\n", rg_out_file_stream(file));
    ck_assert_int_eq(access(path, F_OK), -1);
    ck_assert_int_eq(n_files(), 1);                         /* the temporary one stands in the same folder */
    ck_assert_int_eq(rg_out_file_keep(file, NULL), RG_OK);
    holds(path, "new\n");
    ck_assert_int_eq(n_files(), 1);
}
END_TEST

START_TEST(replaces_only_when_kept)
{
    put(path, "old\n");
    rg_out_file *file = opened();
    fputs("new\n", rg_out_file_stream(file));
    fflush(rg_out_file_stream(file));
    holds(path, "old\n");
    ck_assert_int_eq(rg_out_file_keep(file, NULL), RG_OK);
    holds(path, "new\n");
    ck_assert_int_eq(n_files(), 1);
}
END_TEST

START_TEST(dropped_leaves_nothing)
{
    put(path, "old\n");
    rg_out_file *file = opened();
    fputs("half", rg_out_file_stream(file));
    rg_out_file_drop(file);
    rg_out_file_drop(NULL);
    holds(path, "old\n");
    ck_assert_int_eq(n_files(), 1);
}
END_TEST

START_TEST(mode_follows_umask)
{
    static const mode_t mask[] = {022, 077, 002};
    struct stat got;
    const mode_t before = umask(mask[_i]);
    ck_assert_int_eq(rg_out_file_keep(opened(), NULL), RG_OK);
    ck_assert_uint_eq(umask(before), mask[_i]);             /* and is what it was */
    ck_assert_int_eq(stat(path, &got), 0);
    ck_assert_uint_eq(got.st_mode & 0777, 0666 & ~mask[_i]);
}
END_TEST

START_TEST(no_such_place)
{
    static const struct { const char *below, *says; } bad[] = {{"/none/table.csv", "its folder is not there"}, {"", "is a folder"}};
    char name[128];
    rg_out_file *file = NULL;
    rg_error err = {{0}};
    snprintf(name, sizeof name, "%s%s", folder, bad[_i].below);
    ck_assert_int_eq(rg_out_file_open(&file, name, &err), RG_SYSTEM);
    ck_assert_ptr_null(file);
    ck_assert_msg(strstr(err.text, name) && strstr(err.text, bad[_i].says), "%s", err.text);
}
END_TEST

/* A limit on the size of files stands for a disk that is full. */
START_TEST(full_disk_keeps_what_was_there)
{
    rg_error err = {{0}};
    put(path, "old\n");
    signal(SIGXFSZ, SIG_IGN);
    ck_assert_int_eq(setrlimit(RLIMIT_FSIZE, &(struct rlimit){1 << 16, RLIM_INFINITY}), 0);
    rg_out_file *file = opened();
    for (int i = 0; i < 1 << 17; i++) fputc('x', rg_out_file_stream(file));
    ck_assert_int_eq(rg_out_file_keep(file, &err), RG_SYSTEM);
    ck_assert_int_eq(setrlimit(RLIMIT_FSIZE, &(struct rlimit){RLIM_INFINITY, RLIM_INFINITY}), 0);
    ck_assert_msg(strstr(err.text, path) && strstr(err.text, "File too large"), "%s", err.text);
    holds(path, "old\n");
    ck_assert_int_eq(n_files(), 1);
}
END_TEST

/* A write that failed is not forgotten when the disk has room again. */
START_TEST(a_hole_is_told)
{
    rg_error err = {{0}};
    put(path, "old\n");
    signal(SIGXFSZ, SIG_IGN);
    rg_out_file *file = opened();
    setvbuf(rg_out_file_stream(file), NULL, _IONBF, 0);
    ck_assert_int_eq(setrlimit(RLIMIT_FSIZE, &(struct rlimit){1, RLIM_INFINITY}), 0);
    fputs("one", rg_out_file_stream(file));
    ck_assert_int_eq(setrlimit(RLIMIT_FSIZE, &(struct rlimit){RLIM_INFINITY, RLIM_INFINITY}), 0);
    fputs("two", rg_out_file_stream(file));
    ck_assert_int_eq(rg_out_file_keep(file, &err), RG_SYSTEM);
    ck_assert_msg(strstr(err.text, path) && strstr(err.text, "refused a part"), "%s", err.text);
    holds(path, "old\n");
    ck_assert_int_eq(n_files(), 1);
}
END_TEST

START_TEST(closed_pipe_is_told)
{
    int end[2];
    rg_out_file *file = NULL;
    rg_error err = {{0}};
    signal(SIGPIPE, SIG_IGN);
    fflush(stdout);
    ck_assert_int_eq(pipe(end), 0);
    const int before = dup(STDOUT_FILENO);
    close(end[0]);
    dup2(end[1], STDOUT_FILENO);
    close(end[1]);
    const rg_status opens = rg_out_file_open(&file, _i == 0 ? NULL : "-", &err);
    if (!opens) fputs("row\n", rg_out_file_stream(file));
    const rg_status keeps = opens ? opens : rg_out_file_keep(file, &err);
    dup2(before, STDOUT_FILENO);
    close(before);
    clearerr(stdout);
    ck_assert_int_eq(keeps, RG_SYSTEM);
    ck_assert_msg(strstr(err.text, "standard output") && strstr(err.text, "Broken pipe"), "%s", err.text);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("out_file");
    TCase *tests = tcase_create("out_file");
    tcase_add_checked_fixture(tests, make_folder, remove_folder);
    tcase_add_test(tests, appears_when_kept);
    tcase_add_test(tests, replaces_only_when_kept);
    tcase_add_test(tests, dropped_leaves_nothing);
    tcase_add_loop_test(tests, mode_follows_umask, 0, 3);
    tcase_add_loop_test(tests, no_such_place, 0, 2);
    tcase_add_test(tests, full_disk_keeps_what_was_there);
    tcase_add_test(tests, a_hole_is_told);
    tcase_add_loop_test(tests, closed_pipe_is_told, 0, 2);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
