/* check_bounces.c - the beams of the bounce mechanism against a dense grid of rays, which shares none of their geometry */
#include "scatter/direction.h"
#include "scatter/scene.h"
#include "world.h"
#include <complex.h>
#include <math.h>

enum { GRID = 1200, N_BOUNCES = 4 };

/* Low enough for a cell of the grid to be a hundredth of a wavelength. */
static const double freq_hz = 10e9;

static vec3 unit_normal(const rg_mesh *mesh, uint32_t f)
{
    const vec3 a = vec3_from(mesh->vertex_m[mesh->facet[f][0]]), b = vec3_from(mesh->vertex_m[mesh->facet[f][1]]),
               c = vec3_from(mesh->vertex_m[mesh->facet[f][2]]);
    const vec3 n = vec3_cross(vec3_sub(b, a), vec3_sub(c, a));
    return vec3_scale(n, 1.0 / vec3_norm(n));
}

static rg_ray ray_from(vec3 o, vec3 d, uint32_t from)
{
    return (rg_ray){.origin_m = {o.x, o.y, o.z}, .direction = {d.x, d.y, d.z}, .t_max_m = INFINITY, .from = from};
}

/* One ray: physical optics at each hit after the first whose way back is free. About the mesh's middle. */
static void trace(const rg_scene *scene, const rg_view *view, vec3 from, double start_m, double cell_m2, double k, double complex s[2][2])
{
    vec3 d = vec3_scale(view->s, -1.0), o = from, e[2] = {view->h, view->v};
    const vec3 receive[2] = {view->h, view->v};
    double path_m = -start_m;                               /* of the phase: -s.r at the start */
    uint32_t last = RG_NO_HIT;
    for (int bounce = 1; bounce <= N_BOUNCES; bounce++) {
        const rg_ray ray = ray_from(o, d, last);
        const rg_hit hit = rg_bvh_closest(scene->bvh, &ray);
        if (hit.facet == RG_NO_HIT) return;
        vec3 n = unit_normal(scene->mesh, hit.facet);
        const double nd = vec3_dot(n, d);
        if (nd > 0.0) {
            if (scene->mesh->shells[scene->mesh->shell[hit.facet]].closed) return;
            n = vec3_scale(n, -1.0);
        }
        o = vec3_add(o, vec3_scale(d, hit.t_m));
        path_m += hit.t_m;
        last = hit.facet;
        const rg_ray back = ray_from(o, view->s, last);
        if (bounce > 1 && vec3_dot(n, view->s) > 0.0 && !rg_bvh_any(scene->bvh, &back)) {
            const double phase = k * (vec3_dot(view->s, o) - path_m);
            const double complex turn = cexp(I * phase) * cell_m2 / fabs(nd) * (-I * k / ROOT_PI);
            for (int q = 0; q < 2; q++)
                for (int t = 0; t < 2; t++) s[q][t] += turn * vec3_dot(receive[q], vec3_cross(n, vec3_cross(d, e[t])));
        }
        d = vec3_sub(d, vec3_scale(n, 2.0 * vec3_dot(n, d)));
        for (int t = 0; t < 2; t++) e[t] = vec3_sub(vec3_scale(n, 2.0 * vec3_dot(n, e[t])), e[t]);
    }
}

static void by_rays(const rg_scene *scene, const rg_view *view, double complex s[2][2])
{
    double low[2] = {INFINITY, INFINITY}, high[2] = {-INFINITY, -INFINITY}, far_m = 1.0;
    const double k = 2.0 * PI * freq_hz / LIGHT_SPEED_M_PER_S;
    /* turned by an odd angle, so that no edge runs along the grid's rows and is off by half a cell all along */
    const vec3 row = vec3_add(vec3_scale(view->h, 0.8), vec3_scale(view->v, 0.6)), column = vec3_cross(view->s, row);
    for (int i = 0; i < 4; i++) s[i / 2][i % 2] = 0.0;
    for (size_t v = 0; v < scene->mesh->n_vertices; v++) {
        const vec3 r = vec3_from(scene->mesh->vertex_m[v]);
        const double at[2] = {vec3_dot(row, r), vec3_dot(column, r)};
        for (int a = 0; a < 2; a++) { low[a] = fmin(low[a], at[a]); high[a] = fmax(high[a], at[a]); }
    }
    const double du = (high[0] - low[0]) / GRID, dv = (high[1] - low[1]) / GRID;
    for (int i = 0; i < GRID; i++)
        for (int j = 0; j < GRID; j++) {
            const vec3 from = vec3_add(vec3_scale(view->s, far_m), vec3_add(vec3_scale(row, low[0] + (i + 0.5) * du), vec3_scale(column, low[1] + (j + 0.5) * dv)));
            trace(scene, view, from, far_m, du * dv, k, s);
        }
}

static rg_status take(void *user, const rg_sweep_aspect *aspect, rg_error *err)
{
    (void)err;
    memcpy(user, aspect->s_m, sizeof(double complex[RG_N_POL]));
    return RG_OK;
}

static world target(int kind)
{
    soup s = {0};
    const double a = 0.2;
    switch (kind) {
    case 0:     /* dihedral of uneven faces */
        add_quad(&s, (vec3){0, 0, 0}, (vec3){a, 0, 0}, (vec3){a, 0, 0.15}, (vec3){0, 0, 0.15});
        add_quad(&s, (vec3){0, 0, 0}, (vec3){0, 0, 0.15}, (vec3){0, 0.12, 0.15}, (vec3){0, 0.12, 0});
        break;
    case 1:     /* trihedral of triangles */
        add_triangle(&s, (vec3){0, 0, 0}, (vec3){a, 0, 0}, (vec3){0, a, 0});
        add_triangle(&s, (vec3){0, 0, 0}, (vec3){0, a, 0}, (vec3){0, 0, a});
        add_triangle(&s, (vec3){0, 0, 0}, (vec3){0, 0, a}, (vec3){a, 0, 0});
        break;
    case 2:     /* a recess: floor and four walls, open toward +x */
        add_rectangle(&s, 0.0, -0.1, -0.08, 0.1, 0.08, 1);
        add_quad(&s, (vec3){0, -0.1, -0.08}, (vec3){0.09, -0.1, -0.08}, (vec3){0.09, -0.1, 0.08}, (vec3){0, -0.1, 0.08});
        add_quad(&s, (vec3){0, 0.1, -0.08}, (vec3){0, 0.1, 0.08}, (vec3){0.09, 0.1, 0.08}, (vec3){0.09, 0.1, -0.08});
        add_quad(&s, (vec3){0, -0.1, -0.08}, (vec3){0, 0.1, -0.08}, (vec3){0.09, 0.1, -0.08}, (vec3){0.09, -0.1, -0.08});
        add_quad(&s, (vec3){0, -0.1, 0.08}, (vec3){0.09, -0.1, 0.08}, (vec3){0.09, 0.1, 0.08}, (vec3){0, 0.1, 0.08});
        break;
    case 3:     /* plates that cross, with a post before them that blocks ways back */
        add_rectangle(&s, 0.0, -0.1, -0.1, 0.1, 0.1, 1);
        add_quad(&s, (vec3){-0.1, 0.03, -0.1}, (vec3){0.1, 0.03, -0.1}, (vec3){0.1, 0.03, 0.1}, (vec3){-0.1, 0.03, 0.1});
        add_box(&s, (vec3){0.12, -0.02, -0.1}, (vec3){0.15, 0.01, 0.1});
        break;
    default:    /* a box before a plate */
        add_rectangle(&s, 0.0, -0.15, -0.15, 0.15, 0.15, 2);
        add_box(&s, (vec3){0.02, -0.04, -0.05}, (vec3){0.08, 0.04, 0.03});
        break;
    }
    return world_of_soup(&s);
}

START_TEST(beams_are_what_rays_add_up_to)
{
    static const double az_deg[] = {20.0, 37.0, 63.0}, el_deg[] = {0.0, 12.0, 31.0};
    world w = target(_i / 9);
    const double az = az_deg[_i % 3] + 3.0, el = el_deg[_i / 3 % 3] + 1.5;
    const rg_view view = rg_view_of_deg(az, el);
    const rg_sweep_plan plan = {.n_el = 1, .n_az = 1, .n_freq = 1, .el_deg = &el, .az_deg = &az, .freq_hz = &freq_hz, .n_threads = 1,
                                .mechanisms = RG_BOUNCE, .n_bounces = N_BOUNCES};
    double complex got[RG_N_POL], want[2][2];
    rg_error err;
    ck_assert_msg(rg_sweep(w.scene, &plan, take, got, NULL, &err) == RG_OK, "%s", err.text);
    by_rays(w.scene, &view, want);
    const vec3 o = vec3_from(w.mesh->origin_m);
    const double k = 2.0 * PI * freq_hz / LIGHT_SPEED_M_PER_S;
    const double complex turn = cexp(2.0 * I * k * vec3_dot(view.s, o)), cross = 0.5 * (want[0][1] + want[1][0]) * turn;
    const double complex hh = want[0][0] * turn, vv = want[1][1] * turn;
    /* A cell's middle decides for it: the outlines of shadows and faces, some 4 m of them, are off by a random half cell, about
     * 1e-5 m2 in all, which is 1.2e-3 m of amplitude at 10 GHz; and a cell's phase is not flat, some 1e-4 of the sum. */
    const double bound_m = 1.5e-3 + 3e-4 * (cabs(hh) + cabs(vv));
    ck_assert_msg(cabs(got[RG_HH] - hh) < bound_m && cabs(got[RG_VV] - vv) < bound_m && cabs(got[RG_HV] - cross) < bound_m,
                  "target %d, az %g, el %g: HH %g%+gj, rays %g%+gj; VV %g%+gj, rays %g%+gj; HV %g%+gj, rays %g%+gj", _i / 9, az, el,
                  creal(got[RG_HH]), cimag(got[RG_HH]), creal(hh), cimag(hh), creal(got[RG_VV]), cimag(got[RG_VV]), creal(vv), cimag(vv),
                  creal(got[RG_HV]), cimag(got[RG_HV]), creal(cross), cimag(cross));
    ck_assert(got[RG_HV] == got[RG_VH]);
    free_world(&w);
}
END_TEST

/* A trihedral's axis needs three reflections: two alone give much less. */
START_TEST(the_third_bounce_counts)
{
    world w = target(1);
    const double az = 45.0, el = 35.264389682754654, high_hz = 77e9;
    double complex two[RG_N_POL], three[RG_N_POL];
    rg_sweep_plan plan = {.n_el = 1, .n_az = 1, .n_freq = 1, .el_deg = &el, .az_deg = &az, .freq_hz = &high_hz, .n_threads = 1,
                          .mechanisms = RG_BOUNCE, .n_bounces = 2};
    ck_assert(rg_sweep(w.scene, &plan, take, two, NULL, NULL) == RG_OK);
    plan.n_bounces = 3;
    ck_assert(rg_sweep(w.scene, &plan, take, three, NULL, NULL) == RG_OK);
    ck_assert_double_gt(rg_dbsm(three[RG_HH]), rg_dbsm(two[RG_HH]) + 15.0);
    free_world(&w);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("bounces");
    TCase *tests = tcase_create("bounces");
    tcase_set_timeout(tests, 280);
    tcase_add_loop_test(tests, beams_are_what_rays_add_up_to, 0, 45);
    tcase_add_test(tests, the_third_bounce_counts);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
