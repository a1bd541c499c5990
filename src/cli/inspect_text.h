/* inspect_text.h - lengths and frequencies in the words of a report */
#ifndef RG_CLI_INSPECT_TEXT_H
#define RG_CLI_INSPECT_TEXT_H

typedef struct { char text[40]; } rg_words;

/* "4.5 m", "450 mm", "4.5 um"; four digits. All return words->text, so that they can stand in an argument list. */
const char *rg_length_words(rg_words *words, double length_m);
/* The same in the unit that suits another length, for several that stand side by side. */
const char *rg_length_words_like(rg_words *words, double length_m, double like_m);
/* "77 GHz", four digits. */
const char *rg_frequency_words(rg_words *words, double freq_hz);

#endif
