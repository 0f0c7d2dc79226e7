/* Runs the probe where an int has 16 bits and files lie in program memory; prints two hashes. */
#include <avr/interrupt.h>
#include <avr/io.h>
#include <avr/pgmspace.h>
#include <avr/sleep.h>

#include "probe.h"

/* Made by the test from a file, with its length. */
extern const uint8_t file_bytes[] PROGMEM;
extern const uint16_t file_length;

static uint32_t hash_of_interpolations(void);
static uint32_t next_word(uint32_t *state);
static void print_word(uint32_t word);
static void print(uint8_t character);

int main(void)
{
    static uint32_t answer[PROBE_ANSWER_WORDS(0)];

    UCSR0B = 1 << TXEN0;
    print_word((uint32_t)probe_open(file_bytes, file_length));
    (void)probe_call(PROBE_WALK, answer, 0, answer);
    print_word(answer[0]);
    print_word(hash_of_interpolations());
    /* Asleep with interrupts off: the emulator ends. */
    cli();
    sleep_mode();
    return 0;
}

static uint32_t hash_of_interpolations(void)
{
    static uint32_t answer[PROBE_ANSWER_WORDS(5)];
    uint32_t state = 1;
    uint32_t hash = 2166136261U;

    for (uint16_t round = 0; round < 4000; round++) {
        uint32_t five[5];

        for (uint8_t index = 0; index < 5; index++) {
            /* Every other round stays within 16 bits. */
            five[index] = next_word(&state) >> (round % 2 == 0 ? 0 : 16);
        }
        (void)probe_call(PROBE_INTERPOLATE, five, 5, answer);
        hash = (hash ^ answer[0]) * 16777619U;
    }
    return hash;
}

/* Marsaglia's xorshift with the triple 13, 17, 5. */
static uint32_t next_word(uint32_t *state)
{
    *state ^= *state << 13;
    *state ^= *state >> 17;
    *state ^= *state << 5;
    return *state;
}

static void print_word(uint32_t word)
{
    for (uint8_t digit = 0; digit < 8; digit++) {
        print((uint8_t)"0123456789abcdef"[word >> 28]);
        word <<= 4;
    }
    print('\n');
}

static void print(uint8_t character)
{
    while ((UCSR0A & (1 << UDRE0)) == 0) {
    }
    UDR0 = character;
}
