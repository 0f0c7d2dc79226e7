/* Opens a vector file and finds tables, columns and codes in it. */
#include "hp_bytes.h"

/* The layout of vectors/FORMAT.md: sizes in bytes, and offsets of fields. */
enum {
    HEADER_SIZE = 32,
    VERSION = 8,
    SIZE_OF_HEADER = 10,
    KIND = 12,
    SECTIONS = 16,
    LENGTH = 20,
    HEADER_CRC = 28,

    ENTRY_SIZE = 16,
    ENTRY_OFFSET = 4,
    ENTRY_RECORD_SIZE = 8,
    ENTRY_RECORDS = 12,

    CHANNEL_SIZE = 48,
    CHANNEL_QUANTITY = 4,
    CHANNEL_GROUP = 6,
    CHANNEL_SIGNED = 7,
    CHANNEL_OFFSET = 8,
    CHANNEL_STORAGE = 10,
    CHANNEL_WIDTH = 11,
    CHANNEL_ROUNDING = 12,
    CHANNEL_OVERFLOW = 13,
    CHANNEL_STEP = 16,
    CHANNEL_ORIGIN = 24,
    CHANNEL_NAME = 32,
    NAME_SIZE = 16,

    CRC_SIZE = 4
};

#define TAG_CHANNELS HP_TAG('C', 'H', 'A', 'N')

static enum hp_result check_header(const struct hp_image *image);
static enum hp_result check_directory(const struct hp_image *image);
static enum hp_result check_channels(const struct hp_image *image);
static int is_new_tag(const struct hp_image *image, uint8_t section);
static int is_tag(const uint8_t *at);
static int is_column(const struct hp_image *image, const uint8_t *channel);
static const uint8_t *entry_of(const struct hp_image *image, uint8_t section);

enum hp_result hp_open(struct hp_image *image, const uint8_t *bytes, uint32_t length)
{
    static const uint8_t magic[8] = {0x48, 0x50, 0x56, 0xB7, 0x0D, 0x0A, 0x1A, 0x00};
    struct hp_image candidate;
    enum hp_result result;

    if (length < HEADER_SIZE) {
        return HP_ERR_LENGTH;
    }
    for (unsigned index = 0; index < sizeof magic; index++) {
        if (hp_load_u8(bytes + index) != magic[index]) {
            return HP_ERR_MAGIC;
        }
    }
    candidate.bytes = bytes;
    candidate.length = length;
    candidate.kind = hp_load_u32(bytes + KIND);
    candidate.sections = hp_load_u8(bytes + SECTIONS);

    result = check_header(&candidate);
    if (result == HP_OK) {
        result = check_directory(&candidate);
    }
    if (result == HP_OK) {
        result = check_channels(&candidate);
    }
    if (result == HP_OK) {
        *image = candidate;
    }
    return result;
}

static enum hp_result check_header(const struct hp_image *image)
{
    const uint8_t *bytes = image->bytes;
    const uint32_t sections = hp_load_u32(bytes + SECTIONS);
    uint32_t crc;

    if (hp_load_u16(bytes + VERSION) != 1 || hp_load_u16(bytes + SIZE_OF_HEADER) != HEADER_SIZE) {
        return HP_ERR_VERSION;
    }
    if (hp_load_u32(bytes + LENGTH) != image->length) {
        return HP_ERR_LENGTH;
    }
    if (sections < 2 || sections > 16) {
        return HP_ERR_DIRECTORY;
    }
    if (image->length < HEADER_SIZE + ENTRY_SIZE * sections) {
        return HP_ERR_LENGTH;
    }
    crc = hp_crc32(0, bytes, HEADER_CRC);
    crc = hp_crc32(crc, bytes + HEADER_SIZE, ENTRY_SIZE * sections);
    return crc == hp_load_u32(bytes + HEADER_CRC) ? HP_OK : HP_ERR_HEADER_CRC;
}

static enum hp_result check_directory(const struct hp_image *image)
{
    /* Where the next section has to start; never beyond the end of the file. */
    uint32_t offset = HEADER_SIZE + ENTRY_SIZE * (uint32_t)image->sections;

    for (uint8_t section = 0; section < image->sections; section++) {
        const uint8_t *entry = entry_of(image, section);
        const uint32_t record_size = hp_load_u32(entry + ENTRY_RECORD_SIZE);
        const uint32_t records = hp_load_u32(entry + ENTRY_RECORDS);
        const uint32_t room = image->length - offset;

        if (!is_new_tag(image, section) || hp_load_u32(entry + ENTRY_OFFSET) != offset) {
            return HP_ERR_DIRECTORY;
        }
        if (record_size < 4 || record_size > 1024 || record_size % 4 != 0) {
            return HP_ERR_DIRECTORY;
        }
        /* By division: the product of the two might not fit 32 bits. */
        if (room < CRC_SIZE || records > (room - CRC_SIZE) / record_size) {
            return HP_ERR_DIRECTORY;
        }
        offset += records * record_size + CRC_SIZE;
    }
    return offset == image->length ? HP_OK : HP_ERR_DIRECTORY;
}

static int is_new_tag(const struct hp_image *image, uint8_t section)
{
    const uint8_t *entry = entry_of(image, section);

    for (uint8_t earlier = 0; earlier < section; earlier++) {
        if (hp_load_u32(entry_of(image, earlier)) == hp_load_u32(entry)) {
            return 0;
        }
    }
    return is_tag(entry);
}

static int is_tag(const uint8_t *at)
{
    for (unsigned index = 0; index < 4; index++) {
        const uint8_t letter = hp_load_u8(at + index);

        /* ASCII by number, whatever the character set of the compiler. */
        if (letter < 0x41 || letter > 0x5A) {
            return 0;
        }
    }
    return 1;
}

static enum hp_result check_channels(const struct hp_image *image)
{
    struct hp_table channels;

    if (hp_table_at(image, 0, &channels) != HP_OK || channels.tag != TAG_CHANNELS ||
        channels.record_size != CHANNEL_SIZE) {
        return HP_ERR_CHANNEL;
    }
    for (uint32_t row = 0; row < channels.rows; row++) {
        if (!is_column(image, channels.records + row * CHANNEL_SIZE)) {
            return HP_ERR_CHANNEL;
        }
    }
    return HP_OK;
}

static int is_column(const struct hp_image *image, const uint8_t *channel)
{
    const uint16_t offset = hp_load_u16(channel + CHANNEL_OFFSET);
    const uint8_t storage = hp_load_u8(channel + CHANNEL_STORAGE);
    const uint8_t width = hp_load_u8(channel + CHANNEL_WIDTH);
    struct hp_table table;

    if (hp_find_table(image, hp_load_u32(channel), &table) != HP_OK || table.tag == TAG_CHANNELS) {
        return 0;
    }
    if (storage != 1 && storage != 2 && storage != 4) {
        return 0;
    }
    if (offset % storage != 0 || (uint32_t)offset + storage > table.record_size) {
        return 0;
    }
    return width >= 1 && width <= 8 * storage && hp_load_u8(channel + CHANNEL_SIGNED) <= 1;
}

enum hp_result hp_find_table(const struct hp_image *image, uint32_t tag, struct hp_table *table)
{
    for (uint8_t section = 0; section < image->sections; section++) {
        if (hp_load_u32(entry_of(image, section)) == tag) {
            return hp_table_at(image, section, table);
        }
    }
    return HP_ERR_NOT_FOUND;
}

static const uint8_t *entry_of(const struct hp_image *image, uint8_t section)
{
    return image->bytes + HEADER_SIZE + ENTRY_SIZE * (uint32_t)section;
}

enum hp_result hp_table_at(const struct hp_image *image, uint8_t section, struct hp_table *table)
{
    const uint8_t *entry;

    if (section >= image->sections) {
        return HP_ERR_RANGE;
    }
    entry = entry_of(image, section);
    table->tag = hp_load_u32(entry);
    table->records = image->bytes + hp_load_u32(entry + ENTRY_OFFSET);
    table->rows = hp_load_u32(entry + ENTRY_RECORDS);
    table->record_size = (uint16_t)hp_load_u32(entry + ENTRY_RECORD_SIZE);
    return HP_OK;
}

enum hp_result hp_find_column(const struct hp_image *image, uint32_t tag, uint16_t quantity,
                              uint8_t group, struct hp_column *column)
{
    struct hp_table channels;
    struct hp_table table;

    if (hp_table_at(image, 0, &channels) != HP_OK || hp_find_table(image, tag, &table) != HP_OK) {
        return HP_ERR_NOT_FOUND;
    }
    for (uint32_t row = 0; row < channels.rows; row++) {
        const uint8_t *channel = channels.records + row * CHANNEL_SIZE;

        if (hp_load_u32(channel) == tag && hp_load_u16(channel + CHANNEL_QUANTITY) == quantity &&
            hp_load_u8(channel + CHANNEL_GROUP) == group) {
            column->codes = table.records + hp_load_u16(channel + CHANNEL_OFFSET);
            column->channel = channel;
            column->rows = table.rows;
            column->stride = table.record_size;
            column->storage = hp_load_u8(channel + CHANNEL_STORAGE);
            column->is_signed = hp_load_u8(channel + CHANNEL_SIGNED);
            return HP_OK;
        }
    }
    return HP_ERR_NOT_FOUND;
}

enum hp_result hp_read(const struct hp_column *column, uint32_t row, uint32_t *word)
{
    if (row >= column->rows) {
        return HP_ERR_RANGE;
    }
    *word = hp_load_row(column, row);
    return HP_OK;
}

uint32_t hp_load_row(const struct hp_column *column, uint32_t row)
{
    const uint8_t *at = column->codes + row * (uint32_t)column->stride;
    uint32_t word;
    uint32_t sign;

    if (column->storage == 4) {
        return hp_load_u32(at);
    }
    if (column->storage == 2) {
        word = hp_load_u16(at);
        sign = 0x8000U;
    } else {
        word = hp_load_u8(at);
        sign = 0x80U;
    }
    /* Copies the sign bit upwards, modulo 2^32: no shift of a negative number, no branch. */
    return column->is_signed ? (word ^ sign) - sign : word;
}

void hp_describe(const struct hp_column *column, struct hp_description *description)
{
    const uint8_t *channel = column->channel;

    description->step_low = hp_load_u32(channel + CHANNEL_STEP);
    description->step_high = hp_load_u32(channel + CHANNEL_STEP + 4);
    description->origin_low = hp_load_u32(channel + CHANNEL_ORIGIN);
    description->origin_high = hp_load_u32(channel + CHANNEL_ORIGIN + 4);
    description->width = hp_load_u8(channel + CHANNEL_WIDTH);
    description->rounding = hp_load_u8(channel + CHANNEL_ROUNDING);
    description->overflow = hp_load_u8(channel + CHANNEL_OVERFLOW);
    for (unsigned index = 0; index < NAME_SIZE - 1; index++) {
        description->name[index] = (char)hp_load_u8(channel + CHANNEL_NAME + index);
    }
    /* The format has a zero here. Not taken on trust: a string without an end is read for ever. */
    description->name[NAME_SIZE - 1] = 0;
}
