/* The checks of a vector file that need a pass over its data. */
#include "hp_bytes.h"

static enum hp_result check_sections(const struct hp_image *image);
static enum hp_result check_curves(const struct hp_curves *curves);
static int take(uint32_t *next, uint32_t first, uint32_t number, uint32_t rows);
static int is_falling(const struct hp_curves *curves, uint32_t first, uint32_t end);
static uint32_t rank_in(const struct hp_column *column, uint32_t row);

enum hp_result hp_check(const struct hp_image *image)
{
    struct hp_curves curves;
    enum hp_result result = check_sections(image);

    if (result != HP_OK || image->kind != HP_KIND_CURVES) {
        return result;
    }
    result = hp_find_curves(image, &curves);
    return result == HP_OK ? check_curves(&curves) : result;
}

static enum hp_result check_sections(const struct hp_image *image)
{
    struct hp_table table;

    for (uint8_t section = 0; hp_table_at(image, section, &table) == HP_OK; section++) {
        const uint32_t size = table.rows * table.record_size;

        if (hp_crc32(0, table.records, size) != hp_load_u32(table.records + size)) {
            return HP_ERR_SECTION_CRC;
        }
    }
    return HP_OK;
}

static enum hp_result check_curves(const struct hp_curves *curves)
{
    uint32_t point = 0;
    uint32_t peak = 0;

    for (uint32_t row = 0; row < curves->points.rows; row++) {
        const uint32_t first_point = hp_load_row(&curves->first_point, row);
        const uint32_t first_peak = hp_load_row(&curves->first_peak, row);
        const uint32_t peaks = hp_load_row(&curves->peaks, row);
        const uint32_t global_peak = hp_load_row(&curves->global_peak, row);

        if (!take(&point, first_point, hp_load_row(&curves->points, row), curves->voltage.rows) ||
            !take(&peak, first_peak, peaks, curves->peak_rows)) {
            return HP_ERR_INDEX;
        }
        /* Below the first one it wraps to a large number, which is refused as well. */
        if (peaks > 0 && global_peak - first_peak >= peaks) {
            return HP_ERR_INDEX;
        }
        if (!is_falling(curves, first_point, point)) {
            return HP_ERR_ORDER;
        }
    }
    return HP_OK;
}

/* Takes the next rows of a table, if these are they. Keeps *next <= rows. Because each row is
 * taken once at most, the whole check is one pass over the points, whatever the curves say. */
static int take(uint32_t *next, uint32_t first, uint32_t number, uint32_t rows)
{
    if (first != *next || number > rows - *next) {
        return 0;
    }
    *next += number;
    return 1;
}

static int is_falling(const struct hp_curves *curves, uint32_t first, uint32_t end)
{
    for (uint32_t row = first; row + 1 < end; row++) {
        if (rank_in(&curves->voltage, row) >= rank_in(&curves->voltage, row + 1) ||
            rank_in(&curves->current, row) < rank_in(&curves->current, row + 1)) {
            return 0;
        }
    }
    return 1;
}

static uint32_t rank_in(const struct hp_column *column, uint32_t row)
{
    return hp_load_row(column, row) ^ hp_bias(column);
}
