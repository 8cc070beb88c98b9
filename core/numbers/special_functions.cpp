// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/numbers/special_functions.h"

#include <cmath>
#include <stdexcept>

namespace whichway {
namespace {

double normalDensity(double x) {
    constexpr double kInverseRootTwoPi = 0.3989422804014327;
    return kInverseRootTwoPi * exactExp(-0.5 * x * x);
}

} // namespace

double softplus(double x) {
    const double t = exactExp(x > 0 ? -x : x);
    return (x > 0 ? x : 0.0) + exactLog(1.0 + t);
}

double normalCdf(double x) {
    const double size = std::abs(x);
    if (size <= 3.0) {
        double term = x;
        double sum = x;
        for (int k = 1; k < 60; ++k) {
            term *= x * x / (2 * k + 1);
            sum += term;
        }
        return 0.5 + normalDensity(x) * sum;
    }
    double fraction = 0;
    for (int k = 150; k >= 1; --k)
        fraction = k / (size + fraction);
    const double tail = normalDensity(size) / (size + fraction);
    return x < 0 ? tail : 1.0 - tail;
}

double normalQuantile(double p) {
    if (!(p > 0 && p < 1))
        throw std::invalid_argument("normalQuantile: p must lie in (0, 1)");
    const double q = p - 0.5;
    if (std::abs(q) <= 0.425) {
        const double r = 0.180625 - q * q;
        return q *
               (((((((2.5090809287301226727e+3 * r + 3.3430575583588128105e+4) * r +
                     6.7265770927008700853e+4) *
                        r +
                    4.5921953931549871457e+4) *
                       r +
                   1.3731693765509461125e+4) *
                      r +
                  1.9715909503065514427e+3) *
                     r +
                 1.3314166789178437745e+2) *
                    r +
                3.3871328727963666080e+0) /
               (((((((5.2264952788528545610e+3 * r + 2.8729085735721942674e+4) * r +
                     3.9307895800092710610e+4) *
                        r +
                    2.1213794301586595867e+4) *
                       r +
                   5.3941960214247511077e+3) *
                      r +
                  6.8718700749205790830e+2) *
                     r +
                 4.2313330701600911252e+1) *
                    r +
                1.0);
    }
    double r = std::sqrt(-exactLog(q < 0 ? p : 1.0 - p));
    double size;
    if (r <= 5.0) {
        r -= 1.6;
        size = (((((((7.74545014278341407640e-4 * r + 2.27238449892691845833e-2) * r +
                     2.41780725177450611770e-1) *
                        r +
                    1.27045825245236838258e+0) *
                       r +
                   3.64784832476320460504e+0) *
                      r +
                  5.76949722146069140550e+0) *
                     r +
                 4.63033784615654529590e+0) *
                    r +
                1.42343711074968357734e+0) /
               (((((((1.05075007164441684324e-9 * r + 5.47593808499534494600e-4) * r +
                     1.51986665636164571966e-2) *
                        r +
                    1.48103976427480074590e-1) *
                       r +
                   6.89767334985100004550e-1) *
                      r +
                  1.67638483018380384940e+0) *
                     r +
                 2.05319162663775882187e+0) *
                    r +
                1.0);
    } else {
        r -= 5.0;
        size = (((((((2.01033439929228813265e-7 * r + 2.71155556874348757815e-5) * r +
                     1.24266094738807843860e-3) *
                        r +
                    2.65321895265761230930e-2) *
                       r +
                   2.96560571828504891230e-1) *
                      r +
                  1.78482653991729133580e+0) *
                     r +
                 5.46378491116411436990e+0) *
                    r +
                6.65790464350110377720e+0) /
               (((((((2.04426310338993978564e-15 * r + 1.42151175831644588870e-7) * r +
                     1.84631831751005468180e-5) *
                        r +
                    7.86869131145613259100e-4) *
                       r +
                   1.48753612908506148525e-2) *
                      r +
                  1.36929880922735805310e-1) *
                     r +
                 5.99832206555887937690e-1) *
                    r +
                1.0);
    }
    return q < 0 ? -size : size;
}

} // namespace whichway
