/* Written by hillproof emit. Do not edit: change the suite and emit again.
 *
 * physical value = origin + code * step, with the figures beside each field. */
#ifndef DEMO_ROOF_TIMELINE_H
#define DEMO_ROOF_TIMELINE_H

#include <stdint.h>

struct demo_roof_timeline_sample {
    uint32_t time;       /* uint32 of 0.001 s: s = code * 0.001 */
    uint16_t irradiance; /* uint16 of 0.1 W/m2: W/m2 = code * 0.1 */
    int16_t cell_temp;   /* int16 of 0.01 degC: C = code * 0.01 */
    uint16_t isc;        /* ADC12 0..13.2 A: A = code * 0.00322265625 */
    uint16_t voc;        /* ADC12 0..49.5 V: V = code * 0.0120849609375 */
    uint16_t vmp;        /* ADC12 0..49.5 V: V = code * 0.0120849609375 */
    uint16_t imp;        /* ADC12 0..13.2 A: A = code * 0.00322265625 */
    uint32_t pmp;        /* ADC12 0..49.5 V x ADC12 0..13.2 A: W = code * 0.00003894567489624023 */
};

#define DEMO_ROOF_TIMELINE_SAMPLE_COUNT 695u
extern const struct demo_roof_timeline_sample demo_roof_timeline_samples[695];

#endif
