/* Private: how bytes of a file become integers. Every byte passes through hp_load_u8. */
#ifndef HP_BYTES_H
#define HP_BYTES_H

#ifdef HP_CONFIG
#include HP_CONFIG
#endif

#include "hillproof.h"

#ifndef HP_LOAD_BYTE
#define HP_LOAD_BYTE(p) (*(p))
#endif

static inline uint8_t hp_load_u8(const uint8_t *at)
{
    return (uint8_t)HP_LOAD_BYTE(at);
}

static inline uint16_t hp_load_u16(const uint8_t *at)
{
    /* Widened before the shift: with an int of 16 bits, a byte times 256 would overflow it. */
    return (uint16_t)(hp_load_u8(at) | (uint16_t)((uint16_t)hp_load_u8(at + 1) << 8));
}

static inline uint32_t hp_load_u32(const uint8_t *at)
{
    return (uint32_t)hp_load_u16(at) | (uint32_t)hp_load_u16(at + 2) << 16;
}

/* The code in a row as a word. The caller has made sure that the row is there. */
uint32_t hp_load_row(const struct hp_column *column, uint32_t row);

/* What turns a word of a column into its rank, and a rank into its word, by exclusive or. */
static inline uint32_t hp_bias(const struct hp_column *column)
{
    return column->is_signed ? 0x80000000U : 0U;
}

#endif
