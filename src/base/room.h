/* room.h - arrays that grow */
#ifndef RG_BASE_ROOM_H
#define RG_BASE_ROOM_H
#include <stdbool.h>
#include <stddef.h>
#include <stdlib.h>

/* Room for n elements at least; doubles, so that growing is rare. False without memory, and then nothing has changed. */
static inline bool rg_make_room(void **array, size_t *room, size_t n, size_t element)
{
    if (n <= *room) return true;
    const size_t wanted = n > 2 * *room ? n : 2 * *room;
    void *grown = realloc(*array, wanted * element);
    if (!grown) return false;
    *array = grown;
    *room = wanted;
    return true;
}

/* The same for several arrays of doubles of one length. */
static inline bool rg_make_rooms(double **array[], size_t n_arrays, size_t *room, size_t n)
{
    bool fits = true;
    size_t new_room = *room;
    for (size_t i = 0; i < n_arrays && fits; i++) {
        new_room = *room;
        fits = rg_make_room((void **)array[i], &new_room, n, sizeof(double));
    }
    if (fits) *room = new_room;
    return fits;
}

#endif
