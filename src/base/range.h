/* range.h - a list of quantities, from text */
#ifndef RG_BASE_RANGE_H
#define RG_BASE_RANGE_H
#include "base/quantity.h"
#include <stddef.h>

typedef struct { size_t n; double *value; } rg_list;

/* Reads "0,15,30", "START:STOP:STEP" (both ends when the step lands on them, to a millionth of a step), "START:STOP/COUNT" and mixes
 * such as "0,10:20:5". Values come as START + i STEP, rounded to 15 digits of the
 * larger end, and the end exactly as written. The unit may stand on any of a range's
 * numbers; one that has none takes the unit of the last that has. RG_BAD_VALUE (with what would be right), RG_NO_MEMORY; at most
 * 10 million values. On failure *list is as it was. */
rg_status rg_take_list(rg_list *list, rg_dimension dimension, const char *text, rg_error *err);
void rg_list_free(rg_list *list);   /* and empties it */

#endif
