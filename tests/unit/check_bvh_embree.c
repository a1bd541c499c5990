/* check_bvh_embree.c - the search tree against Embree, which is an independent answer in single precision
 *
 * Both get the same numbers: corners, origins and directions that are floats. Where they differ, long doubles must show that the ray
 * passes an edge, or that the two facets' distances differ, by no more than single precision can tell; and that must be rare.
 */
#include "bvh_scenes.h"
#include <embree3/rtcore.h>
#include <float.h>
#include <stdio.h>

typedef struct { RTCDevice device; RTCScene scene; } embree;

static embree embree_of(const soup *s)
{
    embree e = {.device = rtcNewDevice("threads=1")};
    e.scene = rtcNewScene(e.device);
    rtcSetSceneFlags(e.scene, RTC_SCENE_FLAG_ROBUST);
    RTCGeometry g = rtcNewGeometry(e.device, RTC_GEOMETRY_TYPE_TRIANGLE);
    float(*vertex_m)[3] = rtcSetNewGeometryBuffer(g, RTC_BUFFER_TYPE_VERTEX, 0, RTC_FORMAT_FLOAT3, sizeof *vertex_m, s->n_vertices);
    for (size_t i = 0; i < s->n_vertices; i++)
        for (int axis = 0; axis < 3; axis++) vertex_m[i][axis] = (float)s->vertex_m[i][axis];
    void *facet = rtcSetNewGeometryBuffer(g, RTC_BUFFER_TYPE_INDEX, 0, RTC_FORMAT_UINT3, sizeof *s->facet, s->n_facets);
    memcpy(facet, s->facet, s->n_facets * sizeof *s->facet);
    rtcCommitGeometry(g);
    rtcAttachGeometry(e.scene, g);
    rtcReleaseGeometry(g);
    rtcCommitScene(e.scene);
    ck_assert_int_eq(rtcGetDeviceError(e.device), RTC_ERROR_NONE);
    return e;
}

static void embree_free(embree *e)
{
    rtcReleaseScene(e->scene);
    rtcReleaseDevice(e->device);
}

static uint32_t embree_closest(const embree *e, const rg_ray *ray)
{
    struct RTCIntersectContext context;
    struct RTCRayHit hit = {.ray = {.org_x = (float)ray->origin_m[0], .org_y = (float)ray->origin_m[1], .org_z = (float)ray->origin_m[2],
                                    .dir_x = (float)ray->direction[0], .dir_y = (float)ray->direction[1], .dir_z = (float)ray->direction[2],
                                    .tfar = INFINITY, .mask = ~0u},
                            .hit = {.geomID = RTC_INVALID_GEOMETRY_ID}};
    rtcInitIntersectContext(&context);
    rtcIntersect1(e->scene, &context, &hit);
    return hit.hit.geomID == RTC_INVALID_GEOMETRY_ID ? RG_NO_HIT : hit.hit.primID;
}

static void to_floats(double x[], size_t n)
{
    for (size_t i = 0; i < n; i++) x[i] = (float)x[i];
}

static soup scene_of(int i)
{
    srand48(500 + i);
    soup s = i == 0 ? random_soup(2000, 0.1, 0.0) : i == 1 ? random_soup(300, 0.5, 0.0) : bumpy_sphere(159, 0.1);
    to_floats(s.vertex_m[0], 3 * s.n_vertices);
    return s;
}

/* Sixteen roundings of the coordinates that the ray and the facet have. */
static const long double tell_m = 16.0L * FLT_EPSILON * 4.0L;

/* The nearer of the two answers is the one that the other should have given, unless it only grazes. */
static bool within_single_precision(const soup *s, const rg_ray *ray, uint32_t a, uint32_t b)
{
    if (a == RG_NO_HIT || b == RG_NO_HIT) return fabsl(meet_exactly(s, ray, a == RG_NO_HIT ? b : a).margin) <= tell_m;
    const exact_hit ha = meet_exactly(s, ray, a), hb = meet_exactly(s, ray, b);
    return fabsl(ha.t_m - hb.t_m) <= tell_m || fabsl(ha.t_m < hb.t_m ? ha.margin : hb.margin) <= tell_m;
}

START_TEST(embree_sees_the_same)
{
    enum { N = 300000 };
    soup s = scene_of(_i);
    rg_bvh *bvh = tree_of(&s, rg_cpu_best());
    embree e = embree_of(&s);
    int met = 0, grazing = 0;
    for (int i = 0; i < N; i++) {
        double from[3], to[3];
        for (int axis = 0; axis < 3; axis++) from[axis] = between(-2.0, 2.0), to[axis] = between(-1.0, 1.0);
        rg_ray ray = ray_to(from, to);
        if (i % 16 == 0) memcpy(ray.direction, (double[3]){i % 3 == 0, i % 3 == 1, -(double)(i % 3 == 2)}, sizeof ray.direction);
        to_floats(ray.origin_m, 3);
        to_floats(ray.direction, 3);
        const uint32_t mine = rg_bvh_closest(bvh, &ray).facet, theirs = embree_closest(&e, &ray);
        met += mine != RG_NO_HIT;
        if (mine == theirs) continue;
        grazing++;
        ck_assert_msg(within_single_precision(&s, &ray, mine, theirs), "scene %d, ray %d: facet %u here, %u there", _i, i, mine, theirs);
    }
    printf("scene %d: %d of %d rays meet, %d differ, all grazing\n", _i, met, N, grazing);
    ck_assert_int_gt(met, N / 10);
    ck_assert_int_lt(grazing, N / 1000);
    embree_free(&e);
    rg_bvh_free(bvh);
    soup_free(&s);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("bvh and Embree");
    TCase *tests = tcase_create("embree");
    tcase_add_loop_test(tests, embree_sees_the_same, 0, 3);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
