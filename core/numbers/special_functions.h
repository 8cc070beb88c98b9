// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/exp_log.h"

namespace whichway {

/// 1 / (1 + e^-x), without overflow.
inline double logistic(double x) {
    const double t = exactExp(x < 0 ? x : -x);
    return (x < 0 ? t : 1.0) / (1.0 + t);
}

/// ln(1 + e^x), without overflow and without loss for large negative x down to 1e-16 absolute.
double softplus(double x);

/// The standard normal distribution function Phi(x): a power series for |x| <= 3, the continued fraction of
/// the tail beyond (Abramowitz and Stegun 26.2.11 and 26.2.14). Relative error below 1e-12 for x > -37.
double normalCdf(double x);

/// The inverse of Phi for p in (0, 1): algorithm AS 241 (Wichura 1988), about 1e-16 relative.
/// @throws std::invalid_argument if p is not in (0, 1).
double normalQuantile(double p);

} // namespace whichway
