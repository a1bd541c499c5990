/* check_plot.c - limits and marks, what dense curves keep, and what stands in the files: kind, place, side, and nothing without a curve */
#include "plot/plot.h"
#include "run.h"
#include <cairo.h>
#include <dirent.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
#include <sys/wait.h>
#include <unistd.h>

/* The font library keeps its lists until the process ends; a leak check would name them. */
const char *__lsan_default_suppressions(void);
const char *__lsan_default_suppressions(void) { return "leak:libfontconfig"; }

enum { N = 3600 };
static double az_deg[N], level[8][N];
static rg_curve curve[8];
static char folder[] = "/tmp/check_plot.XXXXXX", path[100];

static void new_folder(void)
{
    strcpy(folder, "/tmp/check_plot.XXXXXX");
    ck_assert_ptr_nonnull(mkdtemp(folder));
    for (size_t i = 0; i < 8; i++) {
        for (size_t k = 0; k < N; k++) az_deg[k] = 0.1 * (double)k;
        curve[i] = (rg_curve){"label", N, az_deg, level[i]};
    }
}

static size_t remove_files(void)
{
    size_t n = 0;
    DIR *dir = opendir(folder);
    for (struct dirent *entry; (entry = readdir(dir)); ) {
        char name[400];
        snprintf(name, sizeof name, "%s/%s", folder, entry->d_name);
        n += unlink(name) == 0;
    }
    closedir(dir);
    return n;
}

static void remove_folder(void)
{
    remove_files();
    rmdir(folder);
}

static const char *in_folder(const char *name)
{
    snprintf(path, sizeof path, "%s/%s", folder, name);
    return path;
}

static rg_plot plot_of(rg_plot_kind kind, size_t n)
{
    return (rg_plot){.kind = kind, .title = "Title", .note = "note", .x_name = "azimuth (deg)", .x_is_angle = true, .n_curves = n, .curve = curve,
                     .low_dbsm = NAN, .high_dbsm = NAN, .width_px = 600};
}

START_TEST(limits_show_the_peak_and_most_of_the_rest)
{
    double low, high;
    static const struct { double peak, rest, want_low, want_high; } known[] = {
        {27.3, -10.0, -10.0, 30.0}, {27.3, -14.0, -20.0, 30.0}, {30.0, -20.0, -20.0, 35.0}, {12.0, -200.0, -45.0, 15.0}, {0.5, 0.0, -35.0, 5.0},
        {-61.0, -62.0, -100.0, -60.0}};
    for (size_t i = 0; i < sizeof known / sizeof known[0]; i++) {
        for (size_t k = 0; k < N; k++) level[0][k] = known[i].rest;
        level[0][1777] = known[i].peak;
        rg_plot_limits(1, curve, &low, &high);
        ck_assert_double_eq(high, known[i].want_high);
        ck_assert_double_eq(low, known[i].want_low);
    }
    for (size_t k = 0; k < N; k++) level[0][k] = k % 25 == 0 ? -58.0 : k == 1 ? -1.0 : -45.0;     /* 4 % are left out */
    rg_plot_limits(1, curve, &low, &high);
    ck_assert_double_eq(low, -50.0);
    for (size_t k = 0; k < N; k++) level[0][k] = k % 16 == 0 ? -58.0 : k == 1 ? -1.0 : -45.0;     /* 6 % are not */
    rg_plot_limits(1, curve, &low, &high);
    ck_assert_double_eq(low, -60.0);
    for (size_t k = 0; k < N; k++) level[1][k] = 9.9;                           /* the highest of all curves */
    rg_plot_limits(2, curve, &low, &high);
    ck_assert_double_eq(high, 10.0);
    curve[0].n = 0;
    rg_plot_limits(1, curve, &low, &high);
    ck_assert(isfinite(low) && low < high);
}
END_TEST

START_TEST(marks_are_round_and_few)
{
    double t[RG_PLOT_MOST_TICKS];
    ck_assert_uint_eq(rg_plot_ticks(-180.0, 180.0, 12, true, t), 13);
    ck_assert_double_eq(t[0], -180.0);
    ck_assert_double_eq(t[7], 30.0);
    ck_assert_uint_eq(rg_plot_ticks(-180.0, 180.0, 10, true, t), 9);
    ck_assert_double_eq(t[1], -135.0);
    ck_assert_uint_eq(rg_plot_ticks(-30.0, 30.0, 6, false, t), 7);
    ck_assert_double_eq(t[2], -10.0);
    ck_assert_uint_eq(rg_plot_ticks(-45.0, 15.0, 6, false, t), 6);
    ck_assert_double_eq(t[0], -40.0);
    ck_assert_uint_eq(rg_plot_ticks(76.0, 81.0, 12, false, t), 11);
    ck_assert_double_eq(t[1], 76.5);
    for (int i = 0; i < 20000; i++) {
        const double low = (drand48() - 0.5) * pow(10.0, i % 12 - 4), high = low + pow(10.0, 8.0 * drand48() - 4.0);
        const int n = 2 + i % 12;
        const size_t got = rg_plot_ticks(low, high, n, i % 2, t);
        const double slack = 1e-8 * (high - low);                               /* a step's 1e-9, and fewer than ten steps */
        ck_assert_uint_le(got, (size_t)n + 1);
        for (size_t k = 0; k < got; k++) ck_assert(t[k] >= low - slack && t[k] <= high + slack && (k == 0 || t[k] > t[k - 1]));
        if (n >= 6) ck_assert_uint_ge(got, 2);
    }
    static const double odd[][2] = {{1.0, 1.0}, {2.0, 1.0}, {NAN, 1.0}, {0.0, INFINITY}, {1e17, 1e17 + 64.0}, {-1e308, 1e308}, {0.0, 5e-324}};
    for (size_t i = 0; i < sizeof odd / sizeof odd[0]; i++) ck_assert_uint_le(rg_plot_ticks(odd[i][0], odd[i][1], 6, false, t), RG_PLOT_MOST_TICKS);
}
END_TEST

static double wild(void) { return -10.0 + 10.0 * log10(-log(1.0 - drand48())); }

START_TEST(bands_hold_every_sample_and_no_more)
{
    enum { MOST = 1000 };
    static rg_band band[MOST];
    for (size_t k = 0; k < N; k++) level[0][k] = wild();
    const double step = 0.5503;                                                 /* no sample on a border */
    const size_t n = rg_plot_bands(curve, step, MOST, band);
    ck_assert_uint_eq(n, 655);                                                  /* floor(359.9/0.5503) + 1: all hold samples */
    size_t k = 0, used = 0;
    for (size_t b = 0; b < n; b++) {
        double low = INFINITY, high = -INFINITY;
        for (; k < N && az_deg[k] < (double)(b + 1) * step - 1e-9; k++, used++) {
            low = fmin(low, level[0][k]);
            high = fmax(high, level[0][k]);
        }
        if (k < N) {                                                            /* the line to the next */
            low = fmin(low, level[0][k]);
            high = fmax(high, level[0][k]);
        }
        ck_assert_double_eq(band[b].low, low);
        ck_assert_double_eq(band[b].high, high);
    }
    ck_assert_uint_eq(used, N);
    ck_assert_uint_eq(rg_plot_bands(curve, step, 600, band), 0);
    for (size_t i = 0; i < N; i++) level[0][i] = 10.0 * cos(az_deg[i] * 0.5);   /* 60 turns are a curve */
    ck_assert_uint_eq(rg_plot_bands(curve, step, MOST, band), 0);
    ck_assert_uint_gt(rg_plot_bands(curve, 2.0, MOST, band), 0);                /* 20 samples a step are too many */
    curve[0].n = 1;
    ck_assert_uint_eq(rg_plot_bands(curve, step, MOST, band), 0);
}
END_TEST

START_TEST(each_ending_gives_its_kind_of_file)
{
    static const struct { const char *name, *magic; size_t n; } kind[] = {
        {"a.svg", "<?xml", 5}, {"a.png", "\x89PNG\r\n\x1a\n", 8}, {"a.pdf", "%PDF-", 5}, {"A.PNG", "\x89PNG", 4}};
    for (int polar = 0; polar < 2; polar++)
        for (size_t i = 0; i < sizeof kind / sizeof kind[0]; i++) {
            const rg_plot plot = plot_of(polar ? RG_PLOT_POLAR : RG_PLOT_CARTESIAN, 2);
            rg_error err = {{0}};
            char head[8] = "";
            ck_assert_msg(rg_plot_write(&plot, in_folder(kind[i].name), &err) == RG_OK, "%s", err.text);
            FILE *file = fopen(path, "rb");
            ck_assert_uint_ge(fread(head, 1, sizeof head, file), kind[i].n);
            fclose(file);
            ck_assert_mem_eq(head, kind[i].magic, kind[i].n);
        }
}
END_TEST

START_TEST(what_cannot_be_drawn_is_refused_and_leaves_no_file)
{
    rg_plot plot = plot_of(RG_PLOT_POLAR, 1);
    rg_error err = {{0}};
    static const char *const wrong[] = {"a.jpg", "a", ".png", "a.png.txt", "a.svgz"};
    for (size_t i = 0; i < sizeof wrong / sizeof wrong[0]; i++) {
        char name[20];
        snprintf(name, sizeof name, "%s", wrong[i]);
        ck_assert_int_eq(rg_plot_write(&plot, strcmp(name, ".png") ? in_folder(name) : name, &err), RG_BAD_VALUE);
        ck_assert_ptr_nonnull(strstr(err.text, ".svg, .png or .pdf"));
    }
    plot.width_px = 20;
    ck_assert_int_eq(rg_plot_write(&plot, in_folder("a.png"), &err), RG_BAD_VALUE);
    plot = plot_of(RG_PLOT_POLAR, 0);
    ck_assert_int_eq(rg_plot_write(&plot, in_folder("a.png"), &err), RG_BAD_VALUE);
    plot = plot_of(RG_PLOT_POLAR, 1);
    plot.low_dbsm = plot.high_dbsm = 3.0;
    ck_assert_int_eq(rg_plot_write(&plot, in_folder("a.png"), &err), RG_BAD_VALUE);
    plot = plot_of(RG_PLOT_POLAR, 1);
    ck_assert_int_eq(rg_plot_write(&plot, in_folder("no/such/folder.png"), &err), RG_SYSTEM);
    ck_assert_uint_eq(remove_files(), 0);
}
END_TEST

static void read_file(const char *name, char **bytes, size_t *n)
{
    FILE *file = fopen(in_folder(name), "rb");
    ck_assert_ptr_nonnull(file);
    *bytes = malloc(4000000);
    *n = fread(*bytes, 1, 4000000, file);
    fclose(file);
}

/* In a process of its own, as the program draws: cairo numbers the surfaces of a process, and SVG shows it. */
static void draw_apart(const rg_plot *plot, const char *to)
{
    int status;
    const pid_t child = fork();
    if (child == 0) _exit(rg_plot_write(plot, to, NULL) != RG_OK);
    ck_assert_int_eq(waitpid(child, &status, 0), child);
    ck_assert_int_eq(status, 0);
}

START_TEST(the_same_picture_is_the_same_bytes_a_second_later)
{
    static const char *const name[2][3] = {{"1.svg", "1.png", "1.pdf"}, {"2.svg", "2.png", "2.pdf"}};
    const rg_plot plot = plot_of(RG_PLOT_POLAR, 2);
    for (size_t k = 0; k < N; k++) level[0][k] = wild();
    for (int round = 0; round < 2; round++) {
        if (round) sleep(1);                                                    /* PDF counts seconds */
        for (int i = 0; i < 3; i++) draw_apart(&plot, in_folder(name[round][i]));
    }
    for (int i = 0; i < 3; i++) {
        char *a, *b;
        size_t n_a, n_b;
        read_file(name[0][i], &a, &n_a);
        read_file(name[1][i], &b, &n_b);
        ck_assert_msg(n_a == n_b && memcmp(a, b, n_a) == 0, "%s differs", name[0][i]);
        free(a);
        free(b);
    }
}
END_TEST

typedef struct { int width, height; uint32_t *pixel; } picture;

static picture draw(const rg_plot *plot)
{
    rg_error err = {{0}};
    ck_assert_msg(rg_plot_write(plot, in_folder("p.png"), &err) == RG_OK, "%s", err.text);
    cairo_surface_t *surface = cairo_image_surface_create_from_png(path);
    ck_assert_int_eq(cairo_surface_status(surface), CAIRO_STATUS_SUCCESS);
    picture p = {.width = cairo_image_surface_get_width(surface), .height = cairo_image_surface_get_height(surface)};
    p.pixel = malloc((size_t)p.width * (size_t)p.height * 4);
    for (int y = 0; y < p.height; y++)
        memcpy(p.pixel + y * p.width, cairo_image_surface_get_data(surface) + y * cairo_image_surface_get_stride(surface), (size_t)p.width * 4);
    cairo_surface_destroy(surface);
    return p;
}

/* Nearer to the colour than to anything that white makes of it. */
static bool has_colour(uint32_t pixel, uint32_t colour)
{
    int off = 0;
    for (int shift = 0; shift < 24; shift += 8) off += abs((int)(pixel >> shift & 255) - (int)(colour >> shift & 255));
    return off < 60;
}

enum { BLUE = 0x0072b2, FRAME = 0x595c61 };

/* Lines go on for LONG pixels, up or across; the rims of letters, which have any colour, do not. */
static bool is_line(const picture *p, uint32_t colour, int x, int y)
{
    enum { LONG = 60 };
    int across = 1, down = 1;
    if (!has_colour(p->pixel[y * p->width + x], colour)) return false;
    for (int i = x - 1; i >= 0 && has_colour(p->pixel[y * p->width + i], colour); i--) across++;
    for (int i = x + 1; i < p->width && has_colour(p->pixel[y * p->width + i], colour); i++) across++;
    for (int i = y - 1; i >= 0 && has_colour(p->pixel[i * p->width + x], colour); i--) down++;
    for (int i = y + 1; i < p->height && has_colour(p->pixel[i * p->width + x], colour); i++) down++;
    return across >= LONG || down >= LONG;
}

/* Smallest rectangle around a colour's lines above the legend, from their middles; returns how many pixels they have. */
static int box_of(const picture *p, uint32_t colour, int box[4])
{
    int n = 0;
    box[0] = box[1] = 1 << 30;
    box[2] = box[3] = -1;
    for (int y = 0; y < p->height - 2 * p->width / 46; y++)
        for (int x = 0; x < p->width; x++)
            if (is_line(p, colour, x, y)) {
                n++;
                if (x < box[0]) box[0] = x;
                if (y < box[1]) box[1] = y;
                if (x > box[2]) box[2] = x;
                if (y > box[3]) box[3] = y;
            }
    return n;
}

enum { WIDTH = 2400, LINE = 5 };        /* a line's width there, and a pixel for its rims */

START_TEST(a_curve_stands_where_its_levels_are)
{
    static const double share[] = {0.25, 0.5, 0.9};
    for (size_t i = 0; i < 3; i++) {
        rg_plot plot = plot_of(RG_PLOT_CARTESIAN, 1);
        int frame[4], blue[4];
        for (size_t k = 0; k < N; k++) level[0][k] = -20.0 + 40.0 * share[i];
        plot.low_dbsm = -20.0;
        plot.high_dbsm = 20.0;
        plot.width_px = WIDTH;
        picture p = draw(&plot);
        box_of(&p, FRAME, frame);
        ck_assert_int_gt(box_of(&p, BLUE, blue), WIDTH);
        ck_assert_int_le(abs(blue[0] - frame[0]), LINE);
        ck_assert_int_le(abs(blue[2] - frame[2]), LINE);
        ck_assert_double_eq_tol(0.5 * (blue[1] + blue[3]), frame[3] - share[i] * (frame[3] - frame[1]), LINE);
        free(p.pixel);
        for (size_t k = 0; k < N; k++) level[0][k] = 25.0;                      /* above the highest: outside */
        p = draw(&plot);
        ck_assert_int_eq(box_of(&p, BLUE, blue), 0);
        free(p.pixel);
    }
}
END_TEST

START_TEST(a_circle_has_its_radius)
{
    rg_plot plot = plot_of(RG_PLOT_POLAR, 1);
    int frame[4], blue[4];
    for (size_t k = 0; k < N; k++) level[0][k] = 4.0;                           /* 0.6 of the way from -20 to 20 */
    plot.low_dbsm = -20.0;
    plot.high_dbsm = 20.0;
    plot.width_px = WIDTH;
    picture p = draw(&plot);
    box_of(&p, FRAME, frame);
    ck_assert_int_gt(box_of(&p, BLUE, blue), 0);
    for (int side = 0; side < 2; side++) {
        ck_assert_double_eq_tol(blue[2 + side] - blue[side], 0.6 * (frame[2 + side] - frame[side]), LINE);
        ck_assert_double_eq_tol(0.5 * (blue[2 + side] + blue[side]), 0.5 * (frame[2 + side] + frame[side]), LINE);
    }
    free(p.pixel);
    for (size_t k = 0; k < N; k++) level[0][k] = 21.0;
    p = draw(&plot);
    ck_assert_int_eq(box_of(&p, BLUE, blue), 0);
    free(p.pixel);
}
END_TEST

START_TEST(front_is_up_and_left_is_left)
{
    /* which side of the picture a flash at _i quarter turns is on: up, left, down, right (ISO 8855: y is left, azimuth from x toward y) */
    static const int want[4][2] = {{0, -1}, {-1, 0}, {0, 1}, {1, 0}};
    rg_plot plot = plot_of(RG_PLOT_POLAR, 1);
    int frame[4], blue[4];
    for (size_t k = 0; k < N; k++) level[0][k] = fabs(remainder(az_deg[k] - 90.0 * _i, 360.0)) < 3.0 ? 16.0 : -8.0;
    plot.low_dbsm = -20.0;
    plot.high_dbsm = 20.0;
    plot.width_px = WIDTH;
    picture p = draw(&plot);
    box_of(&p, FRAME, frame);
    box_of(&p, BLUE, blue);
    const double radius = 0.5 * (frame[2] - frame[0]);
    for (int side = 0; side < 2; side++) {
        const double middle = 0.5 * (frame[2 + side] + frame[side]);
        ck_assert_double_eq_tol(middle - blue[side], (want[_i][side] < 0 ? 0.9 : 0.3) * radius, LINE);
        ck_assert_double_eq_tol(blue[2 + side] - middle, (want[_i][side] > 0 ? 0.9 : 0.3) * radius, LINE);
    }
    free(p.pixel);
}
END_TEST

START_TEST(every_curve_has_its_own_colour_in_picture_and_legend)
{
    static const uint32_t colour[8] = {BLUE, 0xd55e00, 0x009e73, 0xcc79a7, 0x000000, 0xe69f00, 0x56b4e9, 0x737373};    /* Okabe and Ito, and a grey */
    rg_plot plot = plot_of(RG_PLOT_CARTESIAN, 8);
    for (size_t i = 0; i < 8; i++)
        for (size_t k = 0; k < N; k++) level[i][k] = -4.0 * (double)i;
    plot.width_px = 1200;
    picture p = draw(&plot);
    for (size_t i = 0; i < 8; i++) {
        int n[2] = {0, 0};
        for (int y = 0; y < p.height; y++)
            for (int x = 0; x < p.width; x++) n[y > p.height - 5 * p.width / 46] += has_colour(p.pixel[y * p.width + x], colour[i]);
        ck_assert_msg(n[0] > 200 && n[1] > 40, "curve %zu: %d pixels in the picture, %d in the legend", i, n[0], n[1]);
    }
    free(p.pixel);
}
END_TEST

START_TEST(odd_curves_and_texts_are_drawn)
{
    static char long_text[3000];
    static double odd_x[] = {-1e300, 0.0, 5e-324, 1e300}, odd_level[] = {1e300, -1e300, -200.0, 1e17};
    memset(long_text, 'w', sizeof long_text - 1);
    for (int kind = 0; kind < 2; kind++)
        for (size_t n = 0; n <= 4; n++) {
            curve[0] = (rg_curve){"\xff\xfe bad \xc3", n, odd_x, odd_level};
            curve[1] = (rg_curve){long_text, n > 0, az_deg, odd_level};
            rg_plot plot = plot_of(kind ? RG_PLOT_POLAR : RG_PLOT_CARTESIAN, 2);
            plot.title = n % 2 ? long_text : "";
            plot.note = n % 2 ? "" : "\xe4\xb8\xad\xed\xa0\x80\n";
            picture p = draw(&plot);
            free(p.pixel);
        }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("plot");
    TCase *tests = tcase_create("plot");
    tcase_add_checked_fixture(tests, new_folder, remove_folder);
    tcase_add_test(tests, limits_show_the_peak_and_most_of_the_rest);
    tcase_add_test(tests, marks_are_round_and_few);
    tcase_add_test(tests, bands_hold_every_sample_and_no_more);
    tcase_add_test(tests, each_ending_gives_its_kind_of_file);
    tcase_add_test(tests, what_cannot_be_drawn_is_refused_and_leaves_no_file);
    tcase_add_test(tests, the_same_picture_is_the_same_bytes_a_second_later);
    tcase_add_test(tests, a_curve_stands_where_its_levels_are);
    tcase_add_test(tests, a_circle_has_its_radius);
    tcase_add_loop_test(tests, front_is_up_and_left_is_left, 0, 4);
    tcase_add_test(tests, every_curve_has_its_own_colour_in_picture_and_legend);
    tcase_add_test(tests, odd_curves_and_texts_are_drawn);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
