/* check_lit.c - the lit area of awkward scenes against brute force, and shadows that sampling would miss */
#include "run.h"
#include "scatter/lit.h"
#include <math.h>
#include <string.h>

#define MM 1e-3

typedef struct { size_t n_vertices, n_facets; double vertex_m[4096][3]; uint32_t facet[4096][3]; } soup;

static void add_triangle(soup *s, const double a[3], const double b[3], const double c[3])
{
    const double *corner[3] = {a, b, c};
    for (int i = 0; i < 3; i++) {
        memcpy(s->vertex_m[s->n_vertices], corner[i], 3 * sizeof(double));
        s->facet[s->n_facets][i] = (uint32_t)s->n_vertices++;
    }
    s->n_facets++;
}

/* Rectangle in the plane x, from (y0, z0) to (y1, z1), two triangles that face +x. */
static void add_rectangle(soup *s, double x, double y0, double z0, double y1, double z1)
{
    const double p[4][3] = {{x, y0, z0}, {x, y1, z0}, {x, y1, z1}, {x, y0, z1}};
    add_triangle(s, p[0], p[1], p[2]);
    add_triangle(s, p[0], p[2], p[3]);
}

typedef struct { rg_mesh *mesh; rg_scene *scene; } world;

static world make_world(const soup *s)
{
    world w = {0};
    rg_error err = {{0}};
    ck_assert_msg(rg_mesh_from_arrays(&w.mesh, s->n_vertices, s->vertex_m, s->n_facets, s->facet, NULL, 0, NULL, &err) == RG_OK, "%s",
                  err.text);
    ck_assert_msg(rg_scene_new(&w.scene, w.mesh, &err) == RG_OK, "%s", err.text);
    return w;
}

static void free_world(world *w)
{
    rg_scene_free(w->scene);
    rg_mesh_free(w->mesh);
}

/* Area that the lit pieces turn toward the radar, m^2; and how many pieces there are, where asked. */
static double lit_area(const world *w, const rg_view *view, double grain_m, size_t *n_pieces)
{
    rg_seen seen = {0};
    rg_lit_scratch *scratch = rg_lit_scratch_new();
    rg_pieces pieces = {0};
    rg_polygons lit = {0};
    double area_m2 = 0.0;
    ck_assert(rg_seen_new(&seen, w->mesh, NULL) == RG_OK);
    rg_seen_turn(&seen, w->mesh, view);
    if (n_pieces) *n_pieces = 0;
    for (uint32_t f = 0; f < w->mesh->n_facets; f++) {
        rg_face face;
        lit.n = 0;
        if (!rg_face_seen(&face, w->mesh, &seen, f)) continue;
        ck_assert(rg_lit_part(w->scene, &seen, &face, &rg_whole_facet, NULL, grain_m, scratch, &lit));
        for (size_t i = 0; i < lit.n; i++) ck_assert(rg_pieces_add(&pieces, &face, &lit.polygon[i]));
    }
    ck_assert(rg_pieces_pad(&pieces));
    ck_assert_uint_eq(pieces.n % RG_LANES, 0);
    for (size_t i = 0; i < pieces.n; i++) {
        ck_assert(pieces.weight_m2[i] >= 0.0);
        area_m2 += 0.5 * pieces.weight_m2[i];
        if (n_pieces) *n_pieces += pieces.weight_m2[i] > 0.0;
    }
    free(lit.polygon);
    rg_pieces_free(&pieces);
    rg_lit_scratch_free(scratch);
    rg_seen_free(&seen);
    return area_m2;
}

/* Area of the mesh's outline as seen: each pixel of a fine grid whose middle any triangle covers. From the definition; what is lit of
 * a scene has just the area of its outline. */
static double outline_area(const soup *s, const rg_view *view, int n)
{
    static double at[4096][2];
    double low[2] = {1e9, 1e9}, high[2] = {-1e9, -1e9};
    for (size_t i = 0; i < s->n_vertices; i++) {
        at[i][0] = vec3_dot(view->h, vec3_from(s->vertex_m[i]));
        at[i][1] = vec3_dot(view->v, vec3_from(s->vertex_m[i]));
        for (int a = 0; a < 2; a++) { low[a] = fmin(low[a], at[i][a]); high[a] = fmax(high[a], at[i][a]); }
    }
    unsigned char *pixel = calloc((size_t)n * (size_t)n, 1);
    const double du = (high[0] - low[0]) / n, dv = (high[1] - low[1]) / n;
    for (size_t f = 0; f < s->n_facets; f++) {
        const double *p = at[s->facet[f][0]], *q = at[s->facet[f][1]], *r = at[s->facet[f][2]];
        for (int i = 0; i < n; i++)
            for (int k = 0; k < n; k++) {
                const double u = low[0] + (i + 0.5) * du, v = low[1] + (k + 0.5) * dv;
                const double e0 = (q[0] - p[0]) * (v - p[1]) - (q[1] - p[1]) * (u - p[0]);
                const double e1 = (r[0] - q[0]) * (v - q[1]) - (r[1] - q[1]) * (u - q[0]);
                const double e2 = (p[0] - r[0]) * (v - r[1]) - (p[1] - r[1]) * (u - r[0]);
                if ((e0 >= 0 && e1 >= 0 && e2 >= 0) || (e0 <= 0 && e1 <= 0 && e2 <= 0)) pixel[i * n + k] = 1;
            }
    }
    size_t hit = 0;
    for (size_t i = 0; i < (size_t)n * (size_t)n; i++) hit += pixel[i];
    free(pixel);
    return (double)hit * du * dv;
}

/* Twelve triangles thrown together, piercing each other: whatever hides what, the lit area is that of the outline. */
START_TEST(lit_area_of_a_soup_is_its_outline)
{
    static soup s;
    s = (soup){0};
    srand48(_i);
    for (int t = 0; t < 12; t++) {
        double p[3][3];
        for (int i = 0; i < 3; i++)
            for (int a = 0; a < 3; a++) p[i][a] = drand48();
        add_triangle(&s, p[0], p[1], p[2]);
    }
    world w = make_world(&s);
    for (int n = 0; n < 3; n++) {
        const rg_view view = rg_view_of_deg(360.0 * drand48(), 180.0 * drand48() - 90.0);
        const double got = lit_area(&w, &view, 1e-3, NULL), want = outline_area(&s, &view, 700);
        /* A pixel's middle decides for it: about 40 edges of length 1 across 700 pixels of 1/700, with random signs. */
        ck_assert_msg(fabs(got - want) < 2e-3, "seed %d: lit %.6f m2, outline %.6f m2", _i, got, want);
    }
    free_world(&w);
}
END_TEST

/* Head on, all by areas that are known: a plate of 1 m and what stands before it. */
START_TEST(known_shadows)
{
    static soup s;
    const rg_view front = rg_view_of_deg(0.0, 0.0);
    static const struct { double x, y0, z0, y1, z1, lit_m2; } before[] = {
        {0.5, -0.015, -0.6, 0.015, 0.6, 1.0 + 0.03 * 0.2},               /* a post that reaches beyond the plate */
        {0.5, -0.0001, -0.0001, 0.0001, 0.0001, 1.0},                    /* a fifth of a millimetre */
        {0.5, -0.6, -0.6, 0.6, 0.6, 1.44},                               /* all hidden */
        {0.5, 0.0, -0.5, 0.5, 0.5, 1.0},                                 /* half */
        {-0.5, -0.6, -0.6, 0.6, 0.6, 1.44},                              /* behind: its rim shows */
    };
    s = (soup){0};
    add_rectangle(&s, 0.0, -0.5, -0.5, 0.5, 0.5);
    add_rectangle(&s, before[_i].x, before[_i].y0, before[_i].z0, before[_i].y1, before[_i].z1);
    world w = make_world(&s);
    ck_assert_double_eq_tol(lit_area(&w, &front, 0.5 * MM, NULL), before[_i].lit_m2, 1e-12);
    free_world(&w);
}
END_TEST

/* 400 squares of 0.2 mm before one plate: each hides exactly itself, wherever it stands. */
START_TEST(a_crowd_of_tiny_occluders)
{
    static soup s;
    const rg_view view = rg_view_of_deg(8.0, 5.0);
    s = (soup){0};
    srand48(5);
    add_rectangle(&s, 0.0, -0.5, -0.5, 0.5, 0.5);
    for (int i = 0; i < 400; i++) {
        const double y = 0.04 * (i % 20) - 0.38, z = 0.04 * (i / 20) - 0.38, x = 0.01 + 0.02 * drand48();
        add_rectangle(&s, x, y, z, y + 0.2 * MM, z + 0.2 * MM);
    }
    world w = make_world(&s);
    ck_assert_double_eq_tol(lit_area(&w, &view, 0.5 * MM, NULL), view.s.x, 1e-12);
    free_world(&w);
}
END_TEST

/* Two plates in one plane that overlap: lit once. */
START_TEST(one_plane_is_lit_once)
{
    static soup s;
    const rg_view view = rg_view_of_deg(20.0, -10.0);
    static const double apart_m[] = {0.0, 1e-9, -1e-9, 1e-7, -1e-7};
    s = (soup){0};
    add_rectangle(&s, 0.0, 0.0, 0.0, 1.0, 1.0);
    add_rectangle(&s, apart_m[_i], 0.5, 0.25, 1.5, 0.75);
    world w = make_world(&s);
    ck_assert_double_eq_tol(lit_area(&w, &view, 0.5 * MM, NULL), 1.25 * view.s.x, 1e-6);
    free_world(&w);
}
END_TEST

/* A plate that stands through another one. */
START_TEST(planes_that_cross)
{
    static soup s;
    const rg_view view = rg_view_of_deg(30.0, 0.0);
    const double p[4][3] = {{-1, 0, -0.5}, {1, 0, -0.5}, {1, 0, 0.5}, {-1, 0, 0.5}};
    s = (soup){0};
    add_rectangle(&s, 0.0, -1.0, -0.5, 1.0, 0.5);
    add_triangle(&s, p[0], p[1], p[2]);
    add_triangle(&s, p[0], p[2], p[3]);
    world w = make_world(&s);
    /* Seen from 30 degrees both plates span the same height; their outline runs over the wider of the two. */
    ck_assert_double_eq_tol(lit_area(&w, &view, 0.5 * MM, NULL), 2.0 * view.s.x, 1e-12);
    free_world(&w);
}
END_TEST

/* More occluders than can be cut out at once, all over a facet, must still leave what the outline says. */
START_TEST(a_grating)
{
    static soup s;
    const rg_view view = rg_view_of_deg(0.0, 0.0);
    s = (soup){0};
    add_rectangle(&s, 0.0, -0.5, -0.5, 0.5, 0.5);
    for (int i = 0; i < 300; i++) add_rectangle(&s, 0.1, -0.45 + 0.003 * i, -0.4, -0.45 + 0.003 * i + 0.0015, 0.4);
    world w = make_world(&s);
    size_t n_pieces;
    ck_assert_double_eq_tol(lit_area(&w, &view, 0.05 * MM, &n_pieces), 1.0, 1e-9);
    ck_assert_uint_lt(n_pieces, 100000);
    free_world(&w);
}
END_TEST

/* What the cover proves is what the cutting finds: facet by facet, of soups and of a ball behind a fence, from everywhere. */
START_TEST(the_cover_claims_nothing_else)
{
    static soup s;
    s = (soup){0};
    srand48(100 + _i);
    for (int t = 0; t < 150; t++) {
        double p[3][3];
        for (int i = 0; i < 3; i++)
            for (int a = 0; a < 3; a++) p[i][a] = i == 0 ? drand48() : p[0][a] + 0.25 * (drand48() - 0.5);
        add_triangle(&s, p[0], p[1], p[2]);
    }
    enum { N = 14 };
    for (int i = 0; i < N; i++)                             /* a sheet of joined facets, so that patches have an inside */
        for (int k = 0; k < N; k++) {
            double p[4][3];
            for (int c = 0; c < 4; c++) {
                const double u = (i + (c == 1 || c == 2)) / (double)N, v = (k + (c >= 2)) / (double)N;
                p[c][0] = 0.5 + 0.1 * sin(7.0 * u) * cos(5.0 * v);
                p[c][1] = u;
                p[c][2] = v;
            }
            add_triangle(&s, p[0], p[1], p[2]);
            add_triangle(&s, p[0], p[2], p[3]);
        }
    world w = make_world(&s);
    rg_seen seen = {0};
    rg_cover *cover = NULL;
    rg_lit_scratch *scratch = rg_lit_scratch_new();
    size_t n_state[3] = {0};
    ck_assert(rg_seen_new(&seen, w.mesh, NULL) == RG_OK && rg_cover_new(&cover, w.mesh, NULL) == RG_OK);
    for (int n = 0; n < 12; n++) {
        const rg_view view = rg_view_of_deg(30.0 * n + 0.7 * _i, 25.0 * (n % 5) - 50.0);
        rg_seen_turn(&seen, w.mesh, &view);
        rg_cover_draw(cover, w.mesh, &seen);
        for (uint32_t f = 0; f < w.mesh->n_facets; f++) {
            rg_face face;
            rg_polygons cut = {0}, found = {0};
            double cut_area2 = 0.0, found_area2 = 0.0, open_m[4];
            if (!rg_face_seen(&face, w.mesh, &seen, f)) continue;
            ck_assert(rg_lit_part(w.scene, &seen, &face, &rg_whole_facet, NULL, 1e-4, scratch, &cut));
            ck_assert(rg_lit_from_afar(w.scene, &seen, cover, &face, &rg_whole_facet, 1e-4, scratch, &found));
            for (size_t i = 0; i < cut.n; i++) cut_area2 += rg_polygon_area2(&cut.polygon[i]);
            for (size_t i = 0; i < found.n; i++) found_area2 += rg_polygon_area2(&found.polygon[i]);
            ck_assert_msg(fabs(cut_area2 - found_area2) < 1e-11, "facet %u, view %d: lit share %.15g, by the cover %.15g", f, n, cut_area2, found_area2);
            n_state[rg_cover_of(cover, &face, open_m)]++;
            free(cut.polygon);
            free(found.polygon);
        }
    }
    ck_assert(n_state[RG_COVER_LIT] > 100 && n_state[RG_COVER_DARK] > 30);      /* or nothing was put to the test */
    rg_lit_scratch_free(scratch);
    rg_cover_free(cover);
    rg_seen_free(&seen);
    free_world(&w);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("lit");
    TCase *tests = tcase_create("lit");
    tcase_set_timeout(tests, 120);
    tcase_add_loop_test(tests, lit_area_of_a_soup_is_its_outline, 0, 25);
    tcase_add_loop_test(tests, known_shadows, 0, 5);
    tcase_add_test(tests, a_crowd_of_tiny_occluders);
    tcase_add_loop_test(tests, one_plane_is_lit_once, 0, 5);
    tcase_add_loop_test(tests, the_cover_claims_nothing_else, 0, 6);
    tcase_add_test(tests, planes_that_cross);
    tcase_add_test(tests, a_grating);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
