/* csv_out.c - tables as CSV */
#include "base/level.h"
#include "table/table.h"
#include <errno.h>
#include <string.h>

const char *const rg_table_pol_name[RG_TABLE_N_POL] = {"hh", "vv", "hv", "vh"};

static rg_status written(FILE *out, rg_error *err)
{
    return ferror(out) ? rg_fail(err, RG_SYSTEM, "the table cannot be written: %s", strerror(errno)) : RG_OK;
}

rg_status rg_csv_head(FILE *out, const char *key, const char *value, rg_error *err)
{
    fprintf(out, "# %s: ", key);
    for (const char *c = value; *c; c++) fputc((unsigned char)*c < 0x20 || *c == 0x7f ? ' ' : *c, out);
    fputc('\n', out);
    return written(out, err);
}

rg_status rg_csv_header(FILE *out, const rg_row_format *format, rg_error *err)
{
    fputs("az_deg,el_deg,freq_hz", out);
    if (format->part_column) fputs(",part", out);
    for (int p = 0; p < RG_TABLE_N_POL; p++)
        if (format->pol[p]) fprintf(out, ",sigma_%s_dbsm", rg_table_pol_name[p]);
    for (int p = 0; p < RG_TABLE_N_POL && format->complex_columns; p++)
        if (format->pol[p]) fprintf(out, ",re_%s_m,im_%s_m", rg_table_pol_name[p], rg_table_pol_name[p]);
    fputc('\n', out);
    return written(out, err);
}

/* The shortest decimal that reads back as the same double; whole numbers without an exponent. */
static void print_number(FILE *out, double v)
{
    char text[40];
    if (v == 0.0) v = 0.0;                                  /* no -0 */
    if (v < 1e15 && v > -1e15 && v == (double)(long long)v) {
        fprintf(out, "%lld", (long long)v);
        return;
    }
    for (int digits = 15; digits <= 17; digits++) {
        double back;
        snprintf(text, sizeof text, "%.*g", digits, v);
        if (sscanf(text, "%lf", &back) == 1 && back == v) break;
    }
    fputs(text, out);
}

static void print_part(FILE *out, const char *part)
{
    if (!strpbrk(part, ",\"\r\n")) {
        fputs(part, out);
        return;
    }
    fputc('"', out);
    for (const char *c = part; *c; c++) {
        if (*c == '"') fputc('"', out);
        fputc(*c, out);
    }
    fputc('"', out);
}

rg_status rg_csv_row(FILE *out, const rg_row_format *format, double az_deg, double el_deg, double freq_hz, const char *part,
                     const double complex s_m[], rg_error *err)
{
    print_number(out, az_deg);
    fputc(',', out);
    print_number(out, el_deg);
    fputc(',', out);
    print_number(out, freq_hz);
    if (format->part_column) {
        fputc(',', out);
        print_part(out, part);
    }
    for (int p = 0; p < RG_TABLE_N_POL; p++)
        if (format->pol[p]) fprintf(out, ",%.7f", rg_level_db(s_m[p]));
    for (int p = 0; p < RG_TABLE_N_POL && format->complex_columns; p++)
        if (format->pol[p]) fprintf(out, ",%.15e,%.15e", creal(s_m[p]), cimag(s_m[p]));
    fputc('\n', out);
    return written(out, err);
}
