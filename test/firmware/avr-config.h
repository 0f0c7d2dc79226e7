/* The HP_CONFIG of an AVR build: files lie in program memory, which plain pointers do not reach. */
#include <avr/pgmspace.h>

#define HP_LOAD_BYTE(p) pgm_read_byte(p)
