/* plate.c - sweeps a square plate through libroadglint
 *
 *     cc plate.c $(pkg-config --cflags --libs roadglint) -lm -o plate && ./plate
 */
#include <roadglint/shape.h>
#include <roadglint/sweep.h>
#include <stdio.h>

static rg_status print_aspect(void *user, const rg_sweep_aspect *aspect, rg_error *err)
{
    (void)user;
    (void)err;
    printf("az %4.1f deg: HH %8.4f dBsm\n", aspect->az_deg, rg_dbsm(aspect->s_m[0][RG_HH]));
    return RG_OK;
}

int main(void)
{
    static const double az_deg[] = {0.0, 1.0, 2.0, 5.0, 10.0}, el_deg[] = {0.0}, freq_hz[] = {77e9};
    const rg_sweep_plan plan = {.n_el = 1, .n_az = 5, .n_freq = 1, .el_deg = el_deg, .az_deg = az_deg, .freq_hz = freq_hz};
    const rg_shape shape = {.kind = RG_PLATE, .size_m = {0.1, 0.1}};
    rg_mesh *mesh = NULL;
    rg_scene *scene = NULL;
    rg_error err;

    rg_status status = rg_shape_mesh(&mesh, &shape, &err);
    if (!status) status = rg_scene_new(&scene, mesh, &err);
    if (!status) status = rg_sweep(scene, &plan, print_aspect, NULL, NULL, &err);
    if (status) fprintf(stderr, "plate: %s\n", err.text);
    rg_scene_free(scene);
    rg_mesh_free(mesh);
    return status ? 1 : 0;
}
