/* Gain in dB and phase in degrees of 1/(a0 + a1 s + …) at 100,000 frequencies: the plain program that the
 * engine's sweep is measured against. Prints the milliseconds of one sweep; leaves gains, then phases, in a file. */
#define _DEFAULT_SOURCE
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

enum { POINTS = 100000, MOST = 16, REPEAT = 15 };

static double omega[POINTS], gain[POINTS], phase[POINTS];

static void sweep(const double *a, int order)
{
    for (int i = 0; i < POINTS; i++) {
        const double w = omega[i], square = -w * w;
        double even = 0, odd = 0;
        for (int k = order - order % 2; k >= 0; k -= 2) even = even * square + a[k];
        for (int k = order - 1 + order % 2; k >= 1; k -= 2) odd = odd * square + a[k];
        odd *= w;
        gain[i] = -10 * log10(even * even + odd * odd);
        phase[i] = -atan2(odd, even) * (180 / M_PI);
    }
}

static double now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_MONOTONIC, &t);
    return t.tv_sec * 1e3 + t.tv_nsec / 1e6;
}

int main(int argc, char **argv)
{
    double a[MOST];
    const int order = argc - 3;
    if (order < 1 || order >= MOST) return 2;
    for (int k = 0; k <= order; k++) a[k] = atof(argv[k + 2]);
    for (int i = 0; i < POINTS; i++) omega[i] = 1e3 * pow(10, 5.0 * i / (POINTS - 1));
    double best = 1e300;
    for (int n = 0; n < REPEAT; n++) {
        const double from = now();
        sweep(a, order);
        const double took = now() - from;
        if (took < best) best = took;
    }
    FILE *out = fopen(argv[1], "wb");
    if (!out) return 1;
    fwrite(gain, sizeof gain, 1, out);
    fwrite(phase, sizeof phase, 1, out);
    fclose(out);
    printf("%.6f\n", best);
    return 0;
}
