#include "probe.h"

#include "hillproof.h"

static struct hp_image image;
static struct hp_curves curves;
static struct hp_curve curve;
static struct hp_column column;
static int is_open;
static enum hp_result curves_result;
static int has_curve;
static int has_column;

static uint32_t select_curve(uint32_t index, uint32_t *answer);
static uint32_t find_column(const uint32_t *words, uint32_t *answer);
static uint32_t read_rows(const uint32_t *rows, uint32_t count, uint32_t *answer);
static uint32_t pure(uint32_t request, const uint32_t *words, uint32_t count, uint32_t *answer);
static uint32_t sign_of(uint32_t word, uint32_t *answer);
static uint32_t walk(void);
static uint32_t walk_column(uint32_t hash, const struct hp_column *walked);
static uint32_t walk_curves(uint32_t hash, const struct hp_curves *walked);
static uint32_t walk_curve(uint32_t hash, const struct hp_curve *walked);
static uint32_t mix(uint32_t hash, uint32_t word);

int32_t probe_open(const uint8_t *bytes, uint32_t length)
{
    const enum hp_result result = hp_open(&image, bytes, length);

    is_open = result == HP_OK;
    curves_result = is_open ? hp_find_curves(&image, &curves) : HP_OK;
    has_curve = 0;
    has_column = 0;
    return (int32_t)result;
}

uint32_t probe_call(uint32_t request, const uint32_t *words, uint32_t count, uint32_t *answer)
{
    answer[0] = PROBE_CLOSED;
    switch (request) {
    case PROBE_CHECK:
        if (is_open) {
            answer[0] = (uint32_t)hp_check(&image);
        }
        return 1;
    case PROBE_CURVE:
        return is_open ? select_curve(words[0], answer) : 1;
    case PROBE_CURRENTS:
        if (!has_curve) {
            return 1;
        }
        for (uint32_t index = 0; index < count; index++) {
            answer[index] = hp_curve_current(&curve, words[index]);
        }
        return count;
    case PROBE_COLUMN:
        return is_open ? find_column(words, answer) : 1;
    case PROBE_READ:
        return has_column ? read_rows(words, count, answer) : 1;
    case PROBE_WALK:
        if (is_open) {
            answer[0] = walk();
        }
        return 1;
    default:
        return pure(request, words, count, answer);
    }
}

static uint32_t select_curve(uint32_t index, uint32_t *answer)
{
    const enum hp_result result =
        curves_result == HP_OK ? hp_curve_at(&curves, index, &curve) : curves_result;

    has_curve = result == HP_OK;
    answer[0] = (uint32_t)result;
    if (!has_curve) {
        return 1;
    }
    answer[1] = curve.first_point;
    answer[2] = curve.points;
    answer[3] = curve.first_peak;
    answer[4] = curve.peaks;
    answer[5] = curve.global_peak;
    return 6;
}

static uint32_t find_column(const uint32_t *words, uint32_t *answer)
{
    const enum hp_result result =
        hp_find_column(&image, words[0], (uint16_t)words[1], (uint8_t)words[2], &column);
    struct hp_description description;

    has_column = result == HP_OK;
    answer[0] = (uint32_t)result;
    if (!has_column) {
        return 1;
    }
    hp_describe(&column, &description);
    answer[1] = column.rows;
    answer[2] = column.stride;
    answer[3] = column.storage;
    answer[4] = column.is_signed;
    answer[5] = description.step_high;
    answer[6] = description.step_low;
    answer[7] = description.origin_high;
    answer[8] = description.origin_low;
    answer[9] = description.width;
    answer[10] = description.rounding;
    answer[11] = description.overflow;
    for (uint32_t index = 0; index < sizeof description.name; index++) {
        answer[12 + index] = (uint8_t)description.name[index];
    }
    return 12 + (uint32_t)sizeof description.name;
}

static uint32_t read_rows(const uint32_t *rows, uint32_t count, uint32_t *answer)
{
    for (uint32_t index = 0; index < count; index++) {
        answer[2 * index + 1] = 0xDEADBEEFU;
        answer[2 * index] = (uint32_t)hp_read(&column, rows[index], &answer[2 * index + 1]);
    }
    return 2 * count;
}

static uint32_t pure(uint32_t request, const uint32_t *words, uint32_t count, uint32_t *answer)
{
    uint32_t answers = 0;

    if (request == PROBE_CRC) {
        answer[0] = 0;
        for (uint32_t index = 0; index < count; index++) {
            const uint8_t byte = (uint8_t)words[index];

            answer[0] = hp_crc32(answer[0], &byte, 1);
        }
        return 1;
    }
    if (request == PROBE_SIGNS) {
        for (uint32_t index = 0; index < count; index++) {
            answers += sign_of(words[index], answer + answers);
        }
    }
    if (request == PROBE_INTERPOLATE) {
        for (const uint32_t *five = words; count >= 5; five += 5, count -= 5) {
            answer[answers++] = hp_interpolate(five[0], five[1], five[2], five[3], five[4]);
        }
    }
    return answers;
}

static uint32_t sign_of(uint32_t word, uint32_t *answer)
{
    const int32_t number = hp_signed(word);

    answer[0] = number < 0;
    answer[1] = number < 0 ? (uint32_t)(-(number + 1)) : (uint32_t)number;
    answer[2] = hp_rank(number);
    answer[3] = (uint32_t)hp_unrank(answer[2]);
    return 4;
}

static uint32_t walk(void)
{
    static const uint32_t tags[] = {HP_TAG('C', 'H', 'A', 'N'), HP_TAG_CURVES,  HP_TAG_POINTS,
                                    HP_TAG_PEAKS,               HP_TAG_SAMPLES, 0};
    uint32_t hash = mix(2166136261U, (uint32_t)hp_check(&image));
    struct hp_table table;
    struct hp_column found;
    struct hp_curves walked;

    for (uint8_t section = 0; hp_table_at(&image, section, &table) == HP_OK; section++) {
        hash = mix(hash, table.tag ^ table.rows ^ table.record_size);
    }
    for (uint32_t tag = 0; tag < sizeof tags / sizeof tags[0]; tag++) {
        for (uint16_t quantity = 0; quantity < 22; quantity++) {
            for (uint8_t group = 0; group < 3; group++) {
                if (hp_find_column(&image, tags[tag], quantity, group, &found) == HP_OK) {
                    hash = walk_column(hash, &found);
                }
            }
        }
    }
    return hp_find_curves(&image, &walked) == HP_OK ? walk_curves(hash, &walked) : hash;
}

static uint32_t walk_column(uint32_t hash, const struct hp_column *walked)
{
    const uint32_t extremes[] = {walked->rows - 1, walked->rows, 0x7FFFFFFFU, 0xFFFFFFFFU};
    struct hp_description description;
    uint32_t word = 0;

    hp_describe(walked, &description);
    for (uint32_t index = 0; description.name[index] != 0; index++) {
        hash = mix(hash, (uint8_t)description.name[index]);
    }
    for (uint32_t row = 0; row < 32 && hp_read(walked, row, &word) == HP_OK; row++) {
        hash = mix(hash, word);
    }
    for (uint32_t index = 0; index < 4; index++) {
        if (hp_read(walked, extremes[index], &word) == HP_OK) {
            hash = mix(hash, word);
        }
    }
    return hash;
}

static uint32_t walk_curves(uint32_t hash, const struct hp_curves *walked)
{
    struct hp_curve found;

    for (uint32_t index = 0; index < 32; index++) {
        const enum hp_result result = hp_curve_at(walked, index, &found);

        hash = mix(hash, (uint32_t)result);
        if (result == HP_OK) {
            hash = walk_curve(hash, &found);
        }
    }
    return mix(hash, (uint32_t)hp_curve_at(walked, 0xFFFFFFFFU, &found));
}

static uint32_t walk_curve(uint32_t hash, const struct hp_curve *walked)
{
    uint32_t voltage = 0;

    /* All orders of magnitude, upwards and downwards from both ends of the range of words. */
    for (uint32_t bit = 1; bit != 0; bit <<= 1) {
        hash = mix(hash, hp_curve_current(walked, bit));
        hash = mix(hash, hp_curve_current(walked, ~bit));
    }
    /* At the points themselves, and next to them. */
    for (uint32_t index = 0; index < 32 && index < walked->points; index++) {
        const uint32_t row = walked->first_point + walked->points - 1 - index;

        if (hp_read(&walked->curves->voltage, row, &voltage) == HP_OK) {
            hash = mix(hash, hp_curve_current(walked, voltage));
            hash = mix(hash, hp_curve_current(walked, voltage + 1));
        }
    }
    return hash;
}

/* One step of FNV-1a, by words. */
static uint32_t mix(uint32_t hash, uint32_t word)
{
    return (hash ^ word) * 16777619U;
}
