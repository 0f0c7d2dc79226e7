/* A point on a falling straight line, exact in 32-bit integers. Needs no other file. */
#include "hillproof.h"

static uint32_t scaled_drop(uint32_t drop, uint32_t distance, uint32_t span);

uint32_t hp_interpolate(uint32_t v0, uint32_t i0, uint32_t v1, uint32_t i1, uint32_t v)
{
    if (v <= v0) {
        return i0;
    }
    if (v >= v1) {
        return i1;
    }
    /* From here v0 < v < v1, so the span is at least 2. */
    if (i1 >= i0) {
        return i0;
    }
    /* At most i0 - i1: the result stays between the two. */
    return i0 - scaled_drop(i0 - i1, v - v0, v1 - v0);
}

/* floor((drop * distance + floor(span / 2)) / span), for distance < span. */
static uint32_t scaled_drop(uint32_t drop, uint32_t distance, uint32_t span)
{
    uint32_t quotient = 0;
    uint32_t remainder = 0;

    /* 16 bit * 16 bit + 15 bit -> 32 bit: at most 65535 * 65534 + 32767 < 2^32, no overflow. */
    if (drop <= 0xFFFFU && span <= 0xFFFFU) {
        return (drop * distance + span / 2U) / span;
    }
    /* Long division, one bit of the drop at a time, from the top. It keeps
     *     (bits of the drop so far) * distance = quotient * span + remainder, remainder < span
     * and compares before it adds, so that no step needs more than 32 bits. */
    for (uint32_t bit = 0x80000000U; bit != 0; bit >>= 1) {
        quotient <<= 1;
        if (remainder >= span - remainder) {
            remainder -= span - remainder;
            quotient++;
        } else {
            remainder += remainder;
        }
        if ((drop & bit) != 0) {
            if (remainder >= span - distance) {
                remainder -= span - distance;
                quotient++;
            } else {
                remainder += distance;
            }
        }
    }
    return remainder >= span - span / 2U ? quotient + 1U : quotient;
}

uint32_t hp_rank(int32_t number)
{
    return (uint32_t)number ^ 0x80000000U;
}

int32_t hp_unrank(uint32_t rank)
{
    return hp_signed(rank ^ 0x80000000U);
}

int32_t hp_signed(uint32_t word)
{
    /* A plain cast of the upper half is left to the implementation: count down from -1 instead. */
    return word <= 0x7FFFFFFFU ? (int32_t)word : -(int32_t)(0xFFFFFFFFU - word) - 1;
}
