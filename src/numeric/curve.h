/* curve.h: piecewise power laws, kept as logarithms.
**
** A curve of a data sheet is drawn on log-log paper; between two of its points it is a straight
** line there, y = a*x^m. Both coordinates are held as natural logarithms, so that reading is one linear
** interpolation, and the logarithms are taken once per part instead of once per reading.
*/
#ifndef NUMERIC_CURVE_H
#define NUMERIC_CURVE_H

#include <stddef.h>

/* ln y at ln x. log_x strictly rising, count >= 1. Outside the points: the value of the nearest
** end. O(count) from the left: curves of data sheets have few points. */
double pf_curve_log_at(const double *log_x, const double *log_y, size_t count, double at);

/* Slope of the straight line through two points; 0 for a vertical one. */
double pf_slope(double x0, double y0, double x1, double y1);

#endif
