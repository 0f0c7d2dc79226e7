/* A HP_CONFIG for a file that no plain read can understand: proves that every byte of it is read
 * through HP_LOAD_BYTE. Constants of the library itself are plain, so only the file differs. */
#define HP_LOAD_BYTE(p) ((uint8_t)(*(p) ^ 0xA5U))
