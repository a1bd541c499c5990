/* csv_out.c - tables as CSV */
#include "base/level.h"
#include "table/decimal.h"
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
    const double place[] = {az_deg, el_deg, freq_hz};
    char text[(3 + 3 * RG_TABLE_N_POL) * (RG_DECIMAL_ROOM + 1) + 1], *end = text;
    for (int i = 0; i < 3; i++) {
        if (i > 0) *end++ = ',';
        end = rg_put_shortest(end, place[i]);
    }
    if (format->part_column) {
        *end++ = ',';
        fwrite(text, 1, (size_t)(end - text), out);
        print_part(out, part);
        end = text;
    }
    for (int p = 0; p < RG_TABLE_N_POL; p++)
        if (format->pol[p]) {
            *end++ = ',';
            end = rg_put_level(end, rg_level_db(s_m[p]));
        }
    for (int p = 0; p < RG_TABLE_N_POL && format->complex_columns; p++)
        if (format->pol[p]) {
            *end++ = ',';
            end = rg_put_amplitude(end, creal(s_m[p]));
            *end++ = ',';
            end = rg_put_amplitude(end, cimag(s_m[p]));
        }
    *end++ = '\n';
    fwrite(text, 1, (size_t)(end - text), out);
    return written(out, err);
}
