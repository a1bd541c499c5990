/* text.h - words and numbers in text files, the same in every locale */
#ifndef RG_MESH_TEXT_H
#define RG_MESH_TEXT_H
#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* Where a reader is. There is a 0 at end. */
typedef struct {
    const char *at, *end;
    size_t line;        /* of at, counted from 1 */
} rg_text;

typedef struct {
    const char *at;
    size_t n;
} rg_word;

/* The next word of this line, empty at the line's end. Blanks are spaces and tabs, also \r, \v and \f. */
rg_word rg_word_in_line(rg_text *text);
/* The next word, over line ends; empty at the end of the text. */
rg_word rg_word_anywhere(rg_text *text);
/* What is left of this line, without blanks at its ends; goes to the next line. */
rg_word rg_rest_of_line(rg_text *text);
void rg_next_line(rg_text *text);

bool rg_word_is(rg_word word, const char *want);
bool rg_word_is_caseless(rg_word word, const char *want);

typedef enum { RG_A_NUMBER, RG_NO_NUMBER, RG_NOT_FINITE } rg_number_kind;

/* All of the word as a number: digits with or without a point, .5 and 5. too, with sign and exponent. Correctly rounded. nan, inf
 * and what overflows: RG_NOT_FINITE. */
rg_number_kind rg_number_of(double *value, rg_word word);
/* All of the word as a whole number in the range of int64_t. */
bool rg_whole_of(int64_t *value, rg_word word);

/* "%.*s" of at most 40 printable characters in out, for messages. */
const char *rg_shown(char out[48], rg_word word);

#endif
