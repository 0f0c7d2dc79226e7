/* Written by hillproof emit. Do not edit: change the suite and emit again.
 *
 * physical value = origin + code * step, with the figures beside each field. */
#ifndef DEMO_ROOF_CURVES_H
#define DEMO_ROOF_CURVES_H

#include <stdint.h>

struct demo_roof_curves_curve {
    uint16_t irradiance;  /* uint16 of 0.1 W/m2: W/m2 = code * 0.1 */
    int16_t cell_temp;    /* int16 of 0.01 degC: C = code * 0.01 */
    uint16_t isc;         /* ADC12 0..13.2 A: A = code * 0.00322265625 */
    uint16_t voc;         /* ADC12 0..49.5 V: V = code * 0.0120849609375 */
    uint32_t first_point; /* plain number */
    uint32_t point_count; /* plain number */
    uint32_t first_peak;  /* plain number */
    uint32_t peak_count;  /* plain number */
    uint32_t global_peak; /* plain number */
};

#define DEMO_ROOF_CURVES_CURVE_COUNT 15u
extern const struct demo_roof_curves_curve demo_roof_curves_curves[15];

struct demo_roof_curves_point {
    uint16_t voltage; /* ADC12 0..49.5 V: V = code * 0.0120849609375 */
    uint16_t current; /* ADC12 0..13.2 A: A = code * 0.00322265625 */
};

#define DEMO_ROOF_CURVES_POINT_COUNT 720u
extern const struct demo_roof_curves_point demo_roof_curves_points[720];

struct demo_roof_curves_peak {
    uint16_t vmp; /* ADC12 0..49.5 V: V = code * 0.0120849609375 */
    uint16_t imp; /* ADC12 0..13.2 A: A = code * 0.00322265625 */
    uint32_t pmp; /* ADC12 0..49.5 V x ADC12 0..13.2 A: W = code * 0.00003894567489624023 */
};

#define DEMO_ROOF_CURVES_PEAK_COUNT 15u
extern const struct demo_roof_curves_peak demo_roof_curves_peaks[15];

#endif
