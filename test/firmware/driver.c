/* Serves the probe on stdin and stdout. All numbers are little-endian words.
 *
 *     request  number, count, then `count` words         answer  count, then `count` words
 *     open     0, length, misaligned (0 or 1), bytes      answer  1, result
 */
#include <stdio.h>
#include <stdlib.h>

#include "probe.h"

static void serve_open(void);
static void serve_call(uint32_t request, uint32_t count);
static int get_word(uint32_t *word);
static uint32_t want_word(void);
static void put_word(uint32_t word);
static void *memory(uint32_t size);

int main(void)
{
    uint32_t request;

    while (get_word(&request)) {
        if (request == 0) {
            serve_open();
        } else {
            serve_call(request, want_word());
        }
        (void)fflush(stdout);
    }
    return 0;
}

/* A file lies in memory of exactly its size, so that a sanitizer sees a read beyond its end. */
static void serve_open(void)
{
    static uint8_t *held;
    const uint32_t length = want_word();
    const uint32_t shift = want_word();
    uint8_t *bytes = memory(length + shift);

    if (fread(bytes + shift, 1, length, stdin) != length) {
        exit(2);
    }
#ifdef PROBE_SCRAMBLE
    for (uint32_t index = 0; index < length; index++) {
        bytes[shift + index] ^= PROBE_SCRAMBLE;
    }
#endif
    put_word(1);
    put_word((uint32_t)probe_open(bytes + shift, length));
    free(held);
    held = bytes;
}

static void serve_call(uint32_t request, uint32_t count)
{
    uint32_t *words = memory(count * (uint32_t)sizeof *words);
    uint32_t *answer = memory(PROBE_ANSWER_WORDS(count) * (uint32_t)sizeof *answer);
    uint32_t answers;

    for (uint32_t index = 0; index < count; index++) {
        words[index] = want_word();
    }
    answers = probe_call(request, words, count, answer);
    put_word(answers);
    for (uint32_t index = 0; index < answers; index++) {
        put_word(answer[index]);
    }
    free(answer);
    free(words);
}

static int get_word(uint32_t *word)
{
    uint8_t bytes[4];

    if (fread(bytes, 1, sizeof bytes, stdin) != sizeof bytes) {
        return 0;
    }
    *word = bytes[0] | (uint32_t)bytes[1] << 8 | (uint32_t)bytes[2] << 16 |
            (uint32_t)bytes[3] << 24;
    return 1;
}

static uint32_t want_word(void)
{
    uint32_t word;

    if (!get_word(&word)) {
        exit(2);
    }
    return word;
}

static void put_word(uint32_t word)
{
    for (uint32_t shift = 0; shift < 32; shift += 8) {
        (void)putchar((int)(word >> shift & 0xFFU));
    }
}

static void *memory(uint32_t size)
{
    void *block = malloc(size);

    if (block == NULL && size > 0) {
        exit(3);
    }
    return block;
}
