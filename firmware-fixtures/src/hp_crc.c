/* CRC-32 of IEEE 802.3, half a byte at a time: 64 bytes of table instead of 1024. */
#include "hp_bytes.h"

uint32_t hp_crc32(uint32_t crc, const uint8_t *bytes, uint32_t length)
{
    /* Entry k is the remainder of k by the reflected polynomial EDB88320 after four shifts. */
    static const uint32_t remainder_of[16] = {
        0x00000000U, 0x1DB71064U, 0x3B6E20C8U, 0x26D930ACU, 0x76DC4190U, 0x6B6B51F4U,
        0x4DB26158U, 0x5005713CU, 0xEDB88320U, 0xF00F9344U, 0xD6D6A3E8U, 0xCB61B38CU,
        0x9B64C2B0U, 0x86D3D2D4U, 0xA00AE278U, 0xBDBDF21CU,
    };

    crc ^= 0xFFFFFFFFU;
    for (uint32_t index = 0; index < length; index++) {
        crc ^= hp_load_u8(bytes + index);
        crc = crc >> 4 ^ remainder_of[crc & 15U];
        crc = crc >> 4 ^ remainder_of[crc & 15U];
    }
    return crc ^ 0xFFFFFFFFU;
}
