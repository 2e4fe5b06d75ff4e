/* curve.c: reading piecewise power laws. */
#include "numeric/curve.h"

double pf_slope(double x0, double y0, double x1, double y1)
{
    return x1 == x0 ? 0 : (y1 - y0) / (x1 - x0);
}

double pf_curve_log_at(const double *log_x, const double *log_y, size_t count, double at)
{
    size_t right = 0;
    while (right < count && log_x[right] < at)
        right++;
    if (right == 0) return log_y[0];
    if (right == count) return log_y[count - 1];
    double slope = pf_slope(log_x[right - 1], log_y[right - 1], log_x[right], log_y[right]);
    return log_y[right] + slope * (at - log_x[right]);
}
