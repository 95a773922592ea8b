/* The loop of repairs/analysis/growth/loop.py, for comparison of speed.

   cc -O2 -shared -fPIC growth.c -o growth.so -lm */

#include <math.h>
#include <stdint.h>

enum { NONE, BY_WHEELER, BY_WILLENBORG };
enum { OUTGROWN, THROUGH, AT_END, FRACTURE, PAUSED };
enum { C, M, FORMAN_END, GAMMA, ZONE, EXPONENT, THRESHOLD, SHUT_OFF, TOUGHNESS,
       THICKNESS, LAST };
enum { LENGTH, DEPTH, FIRST_MEMORY };
enum { LENGTH_AT, DEPTH_AT, LENGTH_UNTIL, DEPTH_UNTIL, FIRST_TIP };
enum { MEMORY = 3 };

static double tip_growth(double intensity, double maximum, double span, double driven,
                         double length, double *memory, int64_t model,
                         const double *constants)
{
    double peak = intensity * maximum, driving = intensity * driven, share = 1.0;
    if (peak >= constants[TOUGHNESS])
        return -1.0;
    if (model == BY_WHEELER) {
        double zone = constants[ZONE] * peak * peak, distance = memory[0] - length;
        if (zone >= distance)
            memory[0] = length + zone;
        else
            share = pow(zone / distance, constants[EXPONENT]);
    } else if (model == BY_WILLENBORG) {
        double zone = constants[ZONE] * peak * peak;
        if (length + zone >= memory[1] + memory[2]) {
            memory[0] = peak;
            memory[1] = length;
            memory[2] = zone;
        } else {
            double passed = (length - memory[1]) / memory[2], taken = 0.0;
            double left = memory[0] * sqrt(1 - passed) - peak;
            if (left > 0 && peak > constants[THRESHOLD])
                taken = (1 - constants[THRESHOLD] / peak) / (constants[SHUT_OFF] - 1)
                        * left;
            if (taken >= peak)
                return 0.0;
            double ratio = 1 - intensity * span / (peak - taken);
            double power = ratio >= 0 ? 1 - constants[GAMMA] : 1.0;
            driving = intensity * span / pow(1 - ratio, power);
        }
    }
    double growth = constants[C] * pow(driving, constants[M]) * share;
    if (constants[FORMAN_END] > 0) {
        double room = fmin(1.0, span / maximum) * constants[FORMAN_END] - driving;
        return room > 0 ? growth / room : -1.0;
    }
    return growth;
}

int64_t march(const double *maximum, const double *span, const double *driven,
              int64_t *place, double *state, const double *local,
              const double *constants, int64_t model, int64_t tips, int64_t until,
              int64_t cycles)
{
    double length = state[LENGTH], depth = state[DEPTH];
    int64_t index = place[0], done = place[1], reason = PAUSED;
    while (done < until) {
        if (maximum[index] > 0) {
            double along = length - local[LENGTH_AT], inward = depth - local[DEPTH_AT];
            const double *tip = local + FIRST_TIP;
            double intensity = tip[0] + tip[1] * along + tip[2] * inward;
            double grown = tip_growth(intensity, maximum[index], span[index],
                                      driven[index], length, state + FIRST_MEMORY,
                                      model, constants);
            double deeper = 0.0;
            if (tips == 2) {
                tip += 3;
                intensity = tip[0] + tip[1] * along + tip[2] * inward;
                deeper = tip_growth(intensity, maximum[index], span[index],
                                    driven[index], depth,
                                    state + FIRST_MEMORY + MEMORY, model, constants);
            }
            if (grown < 0 || deeper < 0) {
                reason = FRACTURE;
                break;
            }
            length += grown;
            depth += deeper;
        }
        index += 1;
        done += 1;
        if (index == cycles)
            index = 0;
        if (tips == 2 && depth >= constants[THICKNESS]) {
            reason = THROUGH;
            break;
        }
        if (length >= constants[LAST]) {
            reason = AT_END;
            break;
        }
        if (length >= local[LENGTH_UNTIL] || depth >= local[DEPTH_UNTIL]) {
            reason = OUTGROWN;
            break;
        }
    }
    state[LENGTH] = length;
    state[DEPTH] = depth;
    place[0] = index;
    place[1] = done;
    return reason;
}
