/* Hillproof vector files (.hpv) on a microcontroller: read in place, look up I-V curves.
 *
 * The bytes are described in vectors/FORMAT.md; nothing of it is needed to use this header.
 *
 * Rules that hold for every function here:
 *   - No heap, no floating point, no recursion, no global state. Every loop is bounded by the
 *     length of the file. The caller owns all memory.
 *   - A file is read where it lies, byte by byte: it may have any alignment, and the host may be
 *     little- or big-endian, with an int of 16 bits or more. There is no 64-bit arithmetic.
 *   - Pointers must not be null. Results behind a pointer are written only if HP_OK is returned.
 *   - Once hp_open has returned HP_OK, no function reads outside the file, whatever its bytes are,
 *     as long as they stay as they are. hp_check adds that the contents make sense.
 *   - Two threads or an interrupt may read the same file at once.
 *
 * A code is one raw integer of a table: what the ADC gives or the DAC takes. Codes travel as
 * words: an unsigned code as it is, a signed one in two's complement over all 32 bits.
 *
 *   number to word   (uint32_t)number          number to rank   hp_rank(number)
 *   word to number   hp_signed(word)           rank to number   hp_unrank(rank)
 *
 * Options, given to the compiler when the library is built:
 *
 * HP_CONFIG        Name of a header in quotes that is read before anything else, for the option
 *                  below and what it needs. Default: none.
 * HP_LOAD_BYTE(p)  Gives the byte at `const uint8_t *p`. Define it where constants do not lie in
 *                  the address space of data (`pgm_read_byte(p)` on AVR with avr/pgmspace.h), or
 *                  where the file sits in a serial flash. Default: (*(p)).
 */
#ifndef HILLPROOF_H
#define HILLPROOF_H

#include <stdint.h>

#ifdef __cplusplus
extern "C" {
#endif

/* What a function returns. Zero is success, errors are below zero and never change their number. */
enum hp_result {
    HP_OK = 0,
    HP_ERR_LENGTH = -1,      /* Not as long as its header says: cut, or a wrong length given. */
    HP_ERR_MAGIC = -2,       /* Not a vector file, or changed by a transfer in text mode. */
    HP_ERR_VERSION = -3,     /* A format version or header size that this library does not know. */
    HP_ERR_HEADER_CRC = -4,  /* Header or directory damaged. */
    HP_ERR_DIRECTORY = -5,   /* Sections do not follow each other as the format says. */
    HP_ERR_CHANNEL = -6,     /* A column outside its record, or described in an unknown way. */
    HP_ERR_SECTION_CRC = -7, /* A section damaged. */
    HP_ERR_NOT_FOUND = -8,   /* No such table or column in this file. */
    HP_ERR_KIND = -9,        /* Not a curve set. */
    HP_ERR_RANGE = -10,      /* Row or curve at or above the number there are. */
    HP_ERR_INDEX = -11,      /* A curve names points or peaks that are not its own or not there. */
    HP_ERR_ORDER = -12,      /* Voltages of a curve do not rise strictly, or its currents rise. */
    HP_ERR_EMPTY = -13       /* The curve has no point: in the dark, off the grid of codes. */
};

/* ---- Files, tables, columns -------------------------------------------------------------- */

enum hp_kind { HP_KIND_CURVES = 1, HP_KIND_TIMELINE = 2 };

/* A tag as hp_find_table takes it: HP_TAG('C', 'U', 'R', 'V'). */
#define HP_TAG(a, b, c, d) \
    ((uint32_t)(a) | (uint32_t)(b) << 8 | (uint32_t)(c) << 16 | (uint32_t)(d) << 24)

#define HP_TAG_CURVES HP_TAG('C', 'U', 'R', 'V')
#define HP_TAG_POINTS HP_TAG('P', 'O', 'I', 'N')
#define HP_TAG_PEAKS HP_TAG('P', 'E', 'A', 'K')
#define HP_TAG_SAMPLES HP_TAG('S', 'A', 'M', 'P')

/* What a column holds, and the unit that its scale is in. */
enum hp_quantity {
    HP_TIME = 1,                  /* s since the start */
    HP_IRRADIANCE = 2,            /* W/m2 in the plane of the module */
    HP_CELL_TEMPERATURE = 3,      /* degrees Celsius */
    HP_VOLTAGE = 4,               /* V */
    HP_CURRENT = 5,               /* A */
    HP_POWER = 6,                 /* W */
    HP_SHORT_CIRCUIT_CURRENT = 7, /* A */
    HP_OPEN_CIRCUIT_VOLTAGE = 8,  /* V */
    HP_PEAK_VOLTAGE = 9,          /* V */
    HP_PEAK_CURRENT = 10,         /* A */
    HP_PEAK_POWER = 11,           /* W */
    HP_FIRST_POINT = 16,          /* row of the points table */
    HP_POINTS = 17,               /* number of points */
    HP_FIRST_PEAK = 18,           /* row of the peaks table */
    HP_PEAKS = 19,                /* number of peaks */
    HP_GLOBAL_PEAK = 20           /* row of the peaks table */
};

/* An open file. All fields are for reading only. */
struct hp_image {
    const uint8_t *bytes; /* first byte of the file */
    uint32_t length;      /* of the whole file, in bytes */
    uint32_t kind;        /* enum hp_kind, or a kind this library does not know */
    uint8_t sections;     /* 2 to 16 */
};

/* One section: records of one size. */
struct hp_table {
    const uint8_t *records; /* first byte of row 0 */
    uint32_t tag;           /* HP_TAG_... */
    uint32_t rows;
    uint16_t record_size; /* in bytes */
};

/* One column of a table. */
struct hp_column {
    const uint8_t *codes;   /* first byte of the code in row 0 */
    const uint8_t *channel; /* where the file describes the column: see hp_describe */
    uint32_t rows;
    uint16_t stride;   /* bytes from row to row */
    uint8_t storage;   /* 1, 2 or 4 bytes a code */
    uint8_t is_signed; /* 1 if hp_signed turns a word of this column into its number */
};

/* Opens a file. Cost: one pass over header, directory and CHAN section, not over the data.
 *
 * image   filled in; `bytes` must outlive it and everything found through it.
 * bytes   first byte of the file, at any alignment.
 * length  bytes that may be read there; must be the length of the file exactly.
 *
 * Returns HP_OK, HP_ERR_LENGTH, HP_ERR_MAGIC, HP_ERR_VERSION, HP_ERR_HEADER_CRC, HP_ERR_DIRECTORY
 * or HP_ERR_CHANNEL.
 */
enum hp_result hp_open(struct hp_image *image, const uint8_t *bytes, uint32_t length);

/* Checks everything that needs a pass over the data. Cost: each byte of the file once, and each
 * point of a curve set once more. A file that came through a checked boot image may skip it.
 *
 * image  from hp_open.
 *
 * Returns HP_OK if the CRC of every section matches and, in a curve set, the curves' points and
 * peaks follow each other inside their tables, the global peak of a curve is one of its own,
 * voltages rise strictly and currents never rise.
 * Otherwise HP_ERR_SECTION_CRC, HP_ERR_NOT_FOUND (a column of a curve set is missing),
 * HP_ERR_INDEX or HP_ERR_ORDER.
 */
enum hp_result hp_check(const struct hp_image *image);

/* The section at a place in the file.
 *
 * section  0 to image->sections - 1; 0 is CHAN, which describes the columns of the others.
 *
 * Returns HP_OK or HP_ERR_RANGE.
 */
enum hp_result hp_table_at(const struct hp_image *image, uint8_t section, struct hp_table *table);

/* Finds a section by its tag.
 *
 * tag  HP_TAG_...
 *
 * Returns HP_OK or HP_ERR_NOT_FOUND.
 */
enum hp_result hp_find_table(const struct hp_image *image, uint32_t tag, struct hp_table *table);

/* Finds a column by what it holds.
 *
 * tag       HP_TAG_... of the table.
 * quantity  enum hp_quantity.
 * group     0 for the whole source or the first shading group, then 1, 2 ...
 *
 * Returns HP_OK or HP_ERR_NOT_FOUND.
 */
enum hp_result hp_find_column(const struct hp_image *image, uint32_t tag, uint16_t quantity,
                              uint8_t group, struct hp_column *column);

/* Reads one code.
 *
 * column  from hp_find_column.
 * row     0 to column->rows - 1.
 * word    the code; hp_signed(word) is its number if column->is_signed.
 *
 * Returns HP_OK or HP_ERR_RANGE.
 */
enum hp_result hp_read(const struct hp_column *column, uint32_t row, uint32_t *word);

/* The number that a word of a signed column stands for. Exact for every word. */
int32_t hp_signed(uint32_t word);

/* How a column counts: physical = origin + number * step, in the unit of its quantity. */
struct hp_description {
    uint32_t step_high; /* upper and lower half of the IEEE 754 binary64 number `step`: */
    uint32_t step_low;  /* without floating point, enough to insist on a scale */
    uint32_t origin_high;
    uint32_t origin_low;
    uint8_t width;    /* bits of a code, 1 to 8 * storage */
    uint8_t rounding; /* how the writer rounded: 0 half even, 1 half up, 2 to zero, 3 floor */
    uint8_t overflow; /* what the writer did out of range: 0 saturate, 1 refuse to write */
    char name[16];    /* always ends with a zero */
};

/* Reads how a column counts and what it is called.
 *
 * column  from hp_find_column.
 */
void hp_describe(const struct hp_column *column, struct hp_description *description);

/* ---- Curves ------------------------------------------------------------------------------ */

/* The columns that make up the curves of a curve set. */
struct hp_curves {
    struct hp_column voltage; /* of points */
    struct hp_column current;
    struct hp_column first_point;
    struct hp_column points;
    struct hp_column first_peak;
    struct hp_column peaks;
    struct hp_column global_peak;
    uint32_t peak_rows; /* of the peaks table */
};

/* One curve. All fields are for reading only. */
struct hp_curve {
    const struct hp_curves *curves;
    uint32_t first_point; /* row of the points table */
    uint32_t points;      /* at least 1 */
    uint32_t first_peak;  /* row of the peaks table */
    uint32_t peaks;       /* may be 0: in the dark there is none */
    uint32_t global_peak; /* row of the peaks table; without meaning if there is no peak */
};

/* Finds the columns of a curve set, once, so that the look-ups need not search for them.
 *
 * curves  filled in; curves->points.rows is the number of curves.
 *
 * Returns HP_OK, HP_ERR_KIND or HP_ERR_NOT_FOUND.
 */
enum hp_result hp_find_curves(const struct hp_image *image, struct hp_curves *curves);

/* Selects a curve.
 *
 * curves  from hp_find_curves; must outlive the curve.
 * index   0 to curves->points.rows - 1.
 *
 * Returns HP_OK, HP_ERR_RANGE, HP_ERR_INDEX (never after hp_check) or HP_ERR_EMPTY.
 */
enum hp_result hp_curve_at(const struct hp_curves *curves, uint32_t index, struct hp_curve *curve);

/* The current of a curve at a voltage, interpolated between its points as hp_interpolate does.
 * Below the first point it is the current of the first point, above the last that of the last.
 * Exact at a point; never rises with voltage if hp_check returned HP_OK, and has no meaning on a
 * curve that hp_check refuses.
 *
 * curve    from hp_curve_at.
 * voltage  word, in codes of curves->voltage; may lie outside the codes of the column.
 *
 * Returns the current as a word, in codes of curves->current. Cost: the binary logarithm of the
 * number of points, and one division.
 */
uint32_t hp_curve_current(const struct hp_curve *curve, uint32_t voltage);

/* ---- Arithmetic -------------------------------------------------------------------------- */

/* The current at v on the straight line from (v0, i0) down to (v1, i1), in integers:
 *
 *     i0 - floor((drop * distance + floor(span / 2)) / span)
 *     with drop = i0 - i1, distance = v - v0, span = v1 - v0
 *
 * which is the drop rounded to the nearest code, halves up. Exact for all 32-bit codes. Falls from
 * i0 at v0 to i1 at v1, never rises in between, and is defined everywhere: i0 where v <= v0, else
 * i1 where v >= v1; between them i0 if i1 is above i0. Needs nothing else of this library, so it
 * serves plain arrays too.
 *
 * All arguments and the result are ranks: unsigned codes are their own rank; for signed codes give
 * hp_rank(code), and take hp_unrank of a current so given. Voltages may be of one sort, currents
 * of the other.
 */
uint32_t hp_interpolate(uint32_t v0, uint32_t i0, uint32_t v1, uint32_t i1, uint32_t v);

/* Signed numbers as unsigned ones in the same order: -2147483648 is 0, 0 is 2147483648. */
uint32_t hp_rank(int32_t number);

/* The number with this rank. */
int32_t hp_unrank(uint32_t rank);

/* CRC-32 of IEEE 802.3, as zlib and Ethernet use it: 0xCBF43926 for the text "123456789".
 *
 * crc  0 to begin, or the result for the bytes before to go on.
 */
uint32_t hp_crc32(uint32_t crc, const uint8_t *bytes, uint32_t length);

#ifdef __cplusplus
}
#endif

#endif
