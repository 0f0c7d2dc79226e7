/* Lets a test call the library with words: unsigned 32-bit numbers in, numbers out. */
#ifndef PROBE_H
#define PROBE_H

#include <stdint.h>

/* What probe_call does. An answer that begins with a result is cut after it unless it is 0. */
enum probe_request {
    PROBE_CHECK = 1,       /* -                           -> result */
    PROBE_CURVE = 2,       /* index                       -> result (also of hp_find_curves), fields */
    PROBE_CURRENTS = 3,    /* voltages                    -> currents, of the curve selected */
    PROBE_INTERPOLATE = 4, /* (v0, i0, v1, i1, v) ...     -> i ... */
    PROBE_COLUMN = 5,      /* tag, quantity, group        -> result, column and its description */
    PROBE_READ = 6,        /* rows                        -> (result, word) ..., of that column */
    PROBE_WALK = 7,        /* -                           -> hash of all that can be asked */
    PROBE_CRC = 8,         /* bytes                       -> CRC, each byte fed on its own */
    PROBE_SIGNS = 9        /* words                       -> (negative, size, rank, back) ... */
};

/* Words that an answer may need: four for each word asked, and the fixed ones. */
#define PROBE_ANSWER_WORDS(count) (4U * (count) + 32U)

/* The answer to a request that needs an open file, or a curve or column selected, without one. */
#define PROBE_CLOSED 1U

/* Opens a file, or closes the one before if it is refused. Gives the result of hp_open. */
int32_t probe_open(const uint8_t *bytes, uint32_t length);

/* Gives the number of words in the answer. */
uint32_t probe_call(uint32_t request, const uint32_t *words, uint32_t count, uint32_t *answer);

#endif
