/*
 * The straightforward search for the valve that best explains PV, as a rival for the fast one: every pair of S and J is
 * simulated, its travel filtered sample by sample for every lag, and compared with PV at every dead time.
 *
 * Reads doubles from standard input in the order of `layOut` in problem.ts. Prints one line for each variant and pair:
 * variant (0 slides-on, 1 sticks-again), pair, misfit, lag index, delay index, gain; then the seconds it took.
 */
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

static void walk(const double *op, int samples, double S, double J, double rest, int slides_on, double tolerance,
                 double blend, double *travel)
{
    const double break_at = (S + J) / 2, behind = (S - J) / 2;
    double at = rest, extreme = 0;
    int direction = 0;
    for (int k = 0; k < samples; k++) {
        if (direction != 0) {
            const double ahead = direction * (op[k] - extreme);
            if (ahead >= -tolerance) {
                if (ahead > 0) extreme = op[k];
                at = op[k] - direction * behind;
                travel[k] = at;
                continue;
            }
            at = extreme - direction * behind;
            direction = 0;
        }
        if (op[k] > at + break_at || op[k] < at - break_at) {
            const int side = op[k] > at ? 1 : -1;
            if (slides_on) {
                direction = side;
                extreme = op[k];
                at = op[k] - side * behind;
            } else {
                at = (1 - blend) * (op[k] - side * behind) + blend * (at + side * J);
            }
        }
        travel[k] = at;
    }
}

static void filter(const double *travel, int samples, const double *pole, int order, double *out)
{
    double x = 0, y = 0, z = 0;
    out[0] = 0;
    for (int k = 1; k < samples; k++) {
        x = pole[0] * x + (1 - pole[0]) * (travel[k] - travel[k - 1]);
        y = pole[1] * y + x;
        z = order == 3 ? pole[2] * z + y : y;
        out[k] = z;
    }
}

static double now(void)
{
    struct timespec time;
    clock_gettime(CLOCK_MONOTONIC, &time);
    return time.tv_sec + 1e-9 * time.tv_nsec;
}

static double *take(int count)
{
    double *values = malloc(count * sizeof *values);
    if (values == NULL || fread(values, sizeof *values, count, stdin) != (size_t)count) {
        fprintf(stderr, "The problem on standard input is too short.\n");
        exit(1);
    }
    return values;
}

int main(void)
{
    const double *head = take(9);
    const int samples = head[0], order = head[1], lags = head[2], delays = head[3], pairs = head[4];
    const double tolerance = head[5], blend = head[6], gain_low = head[7], gain_high = head[8];
    const double *poles = take(lags * order), *delay = take(delays), *S = take(pairs), *J = take(pairs);
    const double *rest = take(pairs);
    const double *target = take(samples), *op = take(samples);
    double *travel = malloc(samples * sizeof *travel), *x = malloc(samples * sizeof *x);
    double *found = malloc(2 * pairs * 4 * sizeof *found);
    if (travel == NULL || x == NULL || found == NULL) return 1;

    const double start = now();
    double power = 0;
    for (int k = 0; k < samples; k++) power += target[k] * target[k];
    for (int variant = 0; variant < 2; variant++) {
        for (int pair = 0; pair < pairs; pair++) {
            double *best = found + 4 * (variant * pairs + pair);
            best[0] = 1;
            best[1] = best[2] = best[3] = 0;
            walk(op, samples, S[pair], J[pair], rest[pair], variant == 0, tolerance * S[pair], blend, travel);
            for (int lag = 0; lag < lags; lag++) {
                filter(travel, samples, poles + lag * order, order, x);
                double whole = 0;
                for (int k = 0; k < samples; k++) whole += x[k] * x[k];
                for (int d = 0; d < delays; d++) {
                    const int by = delay[d], met = samples - by;
                    double dot = 0, energy = whole;
                    for (int k = 0; k < met; k++) dot += x[k] * target[k + by];
                    for (int k = met; k < samples; k++) energy -= x[k] * x[k];
                    if (!(energy > 1e-12) || dot <= 0) continue;
                    double gain = dot / energy;
                    if (gain < gain_low) gain = gain_low;
                    if (gain > gain_high) gain = gain_high;
                    const double misfit = 1 - gain * (2 * dot - gain * energy) / power;
                    if (misfit < best[0]) {
                        best[0] = misfit;
                        best[1] = lag;
                        best[2] = d;
                        best[3] = gain;
                    }
                }
            }
        }
    }
    const double seconds = now() - start;

    for (int row = 0; row < 2 * pairs; row++) {
        const double *best = found + 4 * row;
        printf("%d %d %.17g %d %d %.17g\n", row / pairs, row % pairs, best[0], (int)best[1], (int)best[2], best[3]);
    }
    printf("%.9f\n", seconds);
    return 0;
}
