/* The curves of a curve set, and the look-up of a current at a voltage. */
#include "hp_bytes.h"

static int has_columns(const struct hp_image *image);
static void fetch(const struct hp_image *image, uint32_t tag, uint16_t quantity,
                  struct hp_column *column);
static int is_inside(uint32_t first, uint32_t number, uint32_t rows);

enum hp_result hp_find_curves(const struct hp_image *image, struct hp_curves *curves)
{
    struct hp_table peaks;

    if (image->kind != HP_KIND_CURVES) {
        return HP_ERR_KIND;
    }
    /* Looks for all before it writes any: cheaper in stack than a second hp_curves to copy. */
    if (!has_columns(image) || hp_find_table(image, HP_TAG_PEAKS, &peaks) != HP_OK) {
        return HP_ERR_NOT_FOUND;
    }
    fetch(image, HP_TAG_POINTS, HP_VOLTAGE, &curves->voltage);
    fetch(image, HP_TAG_POINTS, HP_CURRENT, &curves->current);
    fetch(image, HP_TAG_CURVES, HP_FIRST_POINT, &curves->first_point);
    fetch(image, HP_TAG_CURVES, HP_POINTS, &curves->points);
    fetch(image, HP_TAG_CURVES, HP_FIRST_PEAK, &curves->first_peak);
    fetch(image, HP_TAG_CURVES, HP_PEAKS, &curves->peaks);
    fetch(image, HP_TAG_CURVES, HP_GLOBAL_PEAK, &curves->global_peak);
    curves->peak_rows = peaks.rows;
    return HP_OK;
}

static int has_columns(const struct hp_image *image)
{
    struct hp_column column;

    for (uint16_t quantity = HP_FIRST_POINT; quantity <= HP_GLOBAL_PEAK; quantity++) {
        if (hp_find_column(image, HP_TAG_CURVES, quantity, 0, &column) != HP_OK) {
            return 0;
        }
    }
    return hp_find_column(image, HP_TAG_POINTS, HP_VOLTAGE, 0, &column) == HP_OK &&
           hp_find_column(image, HP_TAG_POINTS, HP_CURRENT, 0, &column) == HP_OK;
}

/* A column that is known to be there. */
static void fetch(const struct hp_image *image, uint32_t tag, uint16_t quantity,
                  struct hp_column *column)
{
    (void)hp_find_column(image, tag, quantity, 0, column);
}

enum hp_result hp_curve_at(const struct hp_curves *curves, uint32_t index, struct hp_curve *curve)
{
    struct hp_curve candidate;

    /* The five columns are of one table, so one test covers all. */
    if (index >= curves->points.rows) {
        return HP_ERR_RANGE;
    }
    candidate.curves = curves;
    candidate.first_point = hp_load_row(&curves->first_point, index);
    candidate.points = hp_load_row(&curves->points, index);
    candidate.first_peak = hp_load_row(&curves->first_peak, index);
    candidate.peaks = hp_load_row(&curves->peaks, index);
    candidate.global_peak = hp_load_row(&curves->global_peak, index);

    if (!is_inside(candidate.first_point, candidate.points, curves->voltage.rows) ||
        !is_inside(candidate.first_peak, candidate.peaks, curves->peak_rows)) {
        return HP_ERR_INDEX;
    }
    if (candidate.points == 0) {
        return HP_ERR_EMPTY;
    }
    *curve = candidate;
    return HP_OK;
}

static int is_inside(uint32_t first, uint32_t number, uint32_t rows)
{
    /* Not first + number <= rows: the sum might wrap. */
    return first <= rows && number <= rows - first;
}

uint32_t hp_curve_current(const struct hp_curve *curve, uint32_t voltage)
{
    const struct hp_column *voltages = &curve->curves->voltage;
    const struct hp_column *currents = &curve->curves->current;
    const uint32_t voltage_bias = hp_bias(voltages);
    const uint32_t current_bias = hp_bias(currents);
    const uint32_t v = voltage ^ voltage_bias;
    uint32_t low = curve->first_point;
    uint32_t high = low + (curve->points - 1U);
    uint32_t v_low = hp_load_row(voltages, low) ^ voltage_bias;
    uint32_t v_high = hp_load_row(voltages, high) ^ voltage_bias;

    if (v <= v_low) {
        return hp_load_row(currents, low);
    }
    if (v >= v_high) {
        return hp_load_row(currents, high);
    }
    /* Keeps v_low <= v < v_high even where the points are out of order, so that the segment found
     * has a length; and low < high, so that the search ends. */
    while (high - low > 1U) {
        const uint32_t middle = low + (high - low) / 2U;
        const uint32_t v_middle = hp_load_row(voltages, middle) ^ voltage_bias;

        if (v_middle <= v) {
            low = middle;
            v_low = v_middle;
        } else {
            high = middle;
            v_high = v_middle;
        }
    }
    return current_bias ^ hp_interpolate(v_low, hp_load_row(currents, low) ^ current_bias,
                                         v_high, hp_load_row(currents, high) ^ current_bias, v);
}
