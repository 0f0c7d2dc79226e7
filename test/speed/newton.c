/* The I-V curve of a PV module in the textbook way: Newton's method on the single-diode equation
 *
 *     I = Iph - I0 (exp((V + I Rs) / a) - 1) - (V + I Rs) Gsh
 *
 * in I, with libm's exp. What the library is measured against; see newton-program.mjs.
 *
 *     newton <kernel> <passes> <inputs> <currents>
 *
 * reads the inputs, computes all currents once to warm up and then `passes` times, prints the
 * processor time of those passes in seconds and writes the currents. All files hold doubles in the
 * byte order of the machine. Inputs: the nine of `struct reference` in its order, the number of
 * points, then as many voltages, irradiances (W/m2) and cell temperatures (K).
 */
#define _POSIX_C_SOURCE 199309L
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

/* Of the photocurrent: a step so small ends the iteration. Newton's method converges
 * quadratically, so what the last step leaves is below the rounding of the current. */
#define TOLERANCE 1e-10
#define MOST_PASSES 50

#define STC_IRRADIANCE 1000.0
#define STC_TEMPERATURE 298.15

/* The five parameters at STC, and how they move with the weather. */
struct reference {
    double photocurrent;              /* A */
    double saturation_current;        /* A */
    double ideality_voltage;          /* V */
    double series_resistance;         /* ohm */
    double shunt_conductance;         /* S */
    double short_circuit_coefficient; /* A/K */
    double band_gap;                  /* eV, at the reference temperature */
    double band_gap_slope;            /* 1/K */
    double electronvolt;              /* K: 1 eV over Boltzmann's constant */
};

/* The five parameters at one irradiance and temperature, with what all points share worked out. */
struct diode {
    double source; /* Iph + I0 */
    double saturation_current;
    double per_volt; /* 1 / a */
    double series_resistance;
    double shunt_conductance;
    double start; /* Iph: the short-circuit current, as near as a start needs */
    double tolerance;
};

static double newton(const struct diode *d, double voltage, double start)
{
    double current = start;

    for (int pass = 0; pass < MOST_PASSES; pass++) {
        const double junction = voltage + current * d->series_resistance;
        const double diode = d->saturation_current * exp(junction * d->per_volt);
        const double conductance = diode * d->per_volt + d->shunt_conductance;
        const double excess = d->source - diode - junction * d->shunt_conductance - current;
        const double step = excess / (1.0 + d->series_resistance * conductance);

        current += step;
        if (fabs(step) < d->tolerance) {
            break;
        }
    }
    return current;
}

static struct diode diode_of(double photocurrent, double saturation_current, double ideality_voltage,
                             double series_resistance, double shunt_conductance)
{
    const struct diode d = {
        .source = photocurrent + saturation_current,
        .saturation_current = saturation_current,
        .per_volt = 1.0 / ideality_voltage,
        .series_resistance = series_resistance,
        .shunt_conductance = shunt_conductance,
        .start = photocurrent,
        .tolerance = TOLERANCE * photocurrent,
    };
    return d;
}

/* De Soto, Klein and Beckman 2006, Solar Energy 80:78-88. */
static struct diode translated(const struct reference *r, double irradiance, double temperature)
{
    const double sun = irradiance / STC_IRRADIANCE;
    const double rise = temperature - STC_TEMPERATURE;
    const double ratio = temperature / STC_TEMPERATURE;
    const double gap = r->band_gap * (1.0 + r->band_gap_slope * rise);
    const double i0 = r->saturation_current * ratio * ratio * ratio *
                      exp(r->electronvolt * (r->band_gap / STC_TEMPERATURE - gap / temperature));
    return diode_of(sun * (r->photocurrent + r->short_circuit_coefficient * rise), i0,
                    r->ideality_voltage * ratio, r->series_resistance, r->shunt_conductance * sun);
}

struct work {
    struct reference reference;
    size_t count;
    const double *voltage;
    const double *irradiance;
    const double *temperature;
    double *current;
};

static struct diode at_reference(const struct reference *r)
{
    return diode_of(r->photocurrent, r->saturation_current, r->ideality_voltage,
                    r->series_resistance, r->shunt_conductance);
}

/* One curve; each point starts from the short-circuit current. */
static void fixed_cold(const struct work *w)
{
    const struct diode d = at_reference(&w->reference);

    for (size_t i = 0; i < w->count; i++) {
        w->current[i] = newton(&d, w->voltage[i], d.start);
    }
}

/* One curve; each point starts from the one before, which suits a sweep. */
static void fixed_warm(const struct work *w)
{
    const struct diode d = at_reference(&w->reference);
    double current = d.start;

    for (size_t i = 0; i < w->count; i++) {
        current = newton(&d, w->voltage[i], current);
        w->current[i] = current;
    }
}

/* Every point at its own irradiance and temperature. */
static void changing(const struct work *w)
{
    for (size_t i = 0; i < w->count; i++) {
        const struct diode d = translated(&w->reference, w->irradiance[i], w->temperature[i]);
        w->current[i] = newton(&d, w->voltage[i], d.start);
    }
}

static const struct kernel {
    const char *name;
    void (*run)(const struct work *);
} KERNELS[] = { { "fixed", fixed_cold }, { "sweep", fixed_warm }, { "changing", changing } };

static double processor_time(void)
{
    struct timespec t;
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static int fail(const char *what)
{
    fprintf(stderr, "newton: %s\n", what);
    return EXIT_FAILURE;
}

/* All doubles of the file in fresh memory; NULL if that fails. */
static double *read_doubles(const char *path, size_t *count)
{
    FILE *file = fopen(path, "rb");
    double *doubles = NULL;
    if (file == NULL) {
        return NULL;
    }
    if (fseek(file, 0, SEEK_END) == 0) {
        const long bytes = ftell(file);
        *count = bytes > 0 ? (size_t)bytes / sizeof(double) : 0;
        rewind(file);
        doubles = malloc(*count * sizeof(double) + 1);
        if (doubles != NULL && fread(doubles, sizeof(double), *count, file) != *count) {
            free(doubles);
            doubles = NULL;
        }
    }
    fclose(file);
    return doubles;
}

int main(int argc, char **argv)
{
    enum { HEADER = sizeof(struct reference) / sizeof(double) + 1 };
    const struct kernel *kernel = NULL;
    size_t doubles = 0;
    if (argc != 5) {
        return fail("expected <kernel> <passes> <inputs> <currents>");
    }
    for (size_t i = 0; i < sizeof KERNELS / sizeof *KERNELS; i++) {
        if (strcmp(argv[1], KERNELS[i].name) == 0) {
            kernel = &KERNELS[i];
        }
    }
    double *inputs = read_doubles(argv[3], &doubles);
    if (kernel == NULL || inputs == NULL || doubles < HEADER) {
        return fail("no such kernel, or no inputs");
    }

    struct work work;
    memcpy(&work.reference, inputs, sizeof work.reference);
    work.count = (size_t)inputs[HEADER - 1];
    if (doubles != HEADER + 3 * work.count) {
        return fail("the inputs have another length than they say");
    }
    work.voltage = inputs + HEADER;
    work.irradiance = work.voltage + work.count;
    work.temperature = work.irradiance + work.count;
    work.current = calloc(work.count, sizeof(double));
    if (work.current == NULL) {
        return fail("out of memory");
    }

    kernel->run(&work);
    const int passes = atoi(argv[2]);
    const double start = processor_time();
    for (int pass = 0; pass < passes; pass++) {
        kernel->run(&work);
    }
    printf("%.9f\n", processor_time() - start);

    FILE *out = fopen(argv[4], "wb");
    if (out == NULL || fwrite(work.current, sizeof(double), work.count, out) != work.count ||
        fclose(out) != 0) {
        return fail("cannot write the currents");
    }
    free(work.current);
    free(inputs);
    return EXIT_SUCCESS;
}
