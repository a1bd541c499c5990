/* table.h - RCS tables: in memory, from CSV, to CSV */
#ifndef RG_TABLE_TABLE_H
#define RG_TABLE_TABLE_H
#include <roadglint/status.h>
#include <complex.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>

enum { RG_TABLE_HH, RG_TABLE_VV, RG_TABLE_HV, RG_TABLE_VH, RG_TABLE_N_POL };     /* as RG_HH .. RG_VH of roadglint/scatter.h */
extern const char *const rg_table_pol_name[RG_TABLE_N_POL];                      /* "hh", "vv", "hv", "vh" */

/* A table as it was read. Arrays of n_rows; what a table does not have is NULL. */
typedef struct {
    size_t n_rows;
    double *az_deg, *el_deg, *freq_hz;
    double *sigma_dbsm[RG_TABLE_N_POL];
    double complex *s_m[RG_TABLE_N_POL];
    char **part;                        /* name of the row's mesh part; "total" for the whole */
    size_t n_head;
    char **head_key, **head_value;      /* the lines "# key: value" */
} rg_table;

/* Reads a table of this program's making. RG_BAD_INPUT (the text names line and column), RG_NO_MEMORY. */
rg_status rg_table_read(rg_table *out, const char *path, rg_error *err);
void rg_table_free(rg_table *table);    /* what it holds, not the struct itself */

/* How rows are written; stands in the header line too. */
typedef struct {
    bool pol[RG_TABLE_N_POL];
    bool complex_columns;
    bool part_column;
} rg_row_format;

/* One "# key: value" line; newlines and other control characters in value become spaces. */
rg_status rg_csv_head(FILE *out, const char *key, const char *value, rg_error *err);
rg_status rg_csv_header(FILE *out, const rg_row_format *format, rg_error *err);
/* s_m[RG_TABLE_N_POL], metres. part may be NULL when there is no such column; it is quoted where it must be (RFC 4180). */
rg_status rg_csv_row(FILE *out, const rg_row_format *format, double az_deg, double el_deg, double freq_hz, const char *part,
                     const double complex s_m[], rg_error *err);

#endif
