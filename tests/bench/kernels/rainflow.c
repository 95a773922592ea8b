/* The loop of repairs/analysis/spectra/loops.py, for the measurement only. */

#include <math.h>
#include <stdint.h>

int64_t closed_cycles(const double *points, int64_t size, double *first,
                      double *second, double *counts, double *held, int repeating)
{
    int64_t found = 0, top = 0;
    int rising = 0, falling = 0;
    double last = points[0];

    held[0] = last;
    for (int64_t i = 0; i < size; i++) {
        double value = points[i];
        if (value == last)
            continue;
        int up = value > last;
        if ((up && !rising) || (!up && !falling))
            top++;
        rising = up;
        falling = !up;
        held[top] = last = value;
        while (top >= 2) {
            double older = held[top - 2], newer = held[top - 1];
            if (fabs(value - newer) < fabs(newer - older))
                break;
            first[found] = older;
            second[found] = newer;
            if (top == 2 && !repeating) {
                counts[found] = 0.5;
                held[0] = newer;
                top = 1;
            } else {
                counts[found] = 1.0;
                top -= 2;
            }
            held[top] = value;
            found++;
        }
    }
    for (int64_t left = 0; left < top; left++) {
        first[found] = held[left];
        second[found] = held[left + 1];
        counts[found] = 0.5;
        found++;
    }
    return found;
}
