// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/derivatives.h"

#include "core/numbers/linear_algebra.h"

#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

double lengthOf(double x, double y) {
    return std::sqrt(x * x + y * y);
}

double medianStep(const std::vector<double>& time) {
    std::vector<double> steps;
    for (std::size_t i = 1; i < time.size(); ++i)
        steps.push_back(time[i] - time[i - 1]);
    const auto middle = steps.begin() + static_cast<std::ptrdiff_t>(steps.size() / 2);
    std::nth_element(steps.begin(), middle, steps.end());
    return *middle;
}

/// The first three derivatives at `at` of the least-squares polynomial through values over times [first,
/// last].
struct Local {
    double first = 0, second = 0, third = 0;
};

Local localFit(const std::vector<double>& time, const std::vector<double>& values, std::size_t from,
               std::size_t to, std::size_t at, double scale) {
    const std::size_t terms = std::min<std::size_t>(4, to - from + 1);
    Matrix normal(terms, terms);
    std::vector<double> right(terms, 0.0);
    for (std::size_t i = from; i <= to; ++i) {
        const double t = (time[i] - time[at]) / scale;
        double powers[4] = {1, t, t * t, t * t * t};
        for (std::size_t r = 0; r < terms; ++r) {
            right[r] += powers[r] * (values[i] - values[at]);
            for (std::size_t c = 0; c <= r; ++c)
                normal(r, c) += powers[r] * powers[c];
        }
    }
    Matrix lower;
    if (!cholesky(normal, lower))
        return {};
    solveLower(lower, right);
    solveLowerTransposed(lower, right);
    right.resize(4, 0.0);
    return {.first = right[1] / scale,
            .second = 2 * right[2] / (scale * scale),
            .third = 6 * right[3] / (scale * scale * scale)};
}

} // namespace

Derivatives derivativesOf(const Trajectory& motion, double window) {
    const std::size_t n = motion.time.size();
    Derivatives derivatives;
    if (n < 2)
        return derivatives;
    const double step = medianStep(motion.time);
    const auto half = std::max<std::size_t>(2, static_cast<std::size_t>(std::lround(0.5 * window / step)));
    for (std::size_t i = 0; i < n; ++i) {
        const std::size_t width = std::min(2 * half, n - 1);
        const std::size_t from = std::min(i > half ? i - half : 0, n - 1 - width);
        const double scale = 0.5 * (motion.time[from + width] - motion.time[from]);
        const Local x = localFit(motion.time, motion.x, from, from + width, i, scale);
        const Local y = localFit(motion.time, motion.y, from, from + width, i, scale);
        derivatives.speed.push_back(lengthOf(x.first, y.first));
        derivatives.acceleration.push_back(lengthOf(x.second, y.second));
        derivatives.jerk.push_back(lengthOf(x.third, y.third));
        const double speed = derivatives.speed.back();
        derivatives.across.push_back(speed > 0 ? std::abs(x.first * y.second - y.first * x.second) / speed
                                               : 0);
    }
    return derivatives;
}

EvenSpeed evenSpeedOf(const Trajectory& motion) {
    EvenSpeed even;
    if (motion.time.size() < 2)
        return even;
    const double step = medianStep(motion.time);
    if (!(motion.duration() / step < 10.0 * static_cast<double>(motion.time.size())))
        return even;
    even.rate = 1 / step;
    const auto count = static_cast<std::size_t>(std::lround(motion.duration() / step)) + 1;
    std::vector<Instant> instants;
    for (std::size_t i = 0; i < count; ++i)
        instants.push_back(instantAt(motion, static_cast<double>(i) * step));
    for (std::size_t i = 0; i < count; ++i) {
        const std::size_t a = i > 0 ? i - 1 : 0, b = std::min(i + 1, count - 1);
        if (b > a)
            even.speed.push_back(lengthOf(instants[b].x - instants[a].x, instants[b].y - instants[a].y) /
                                 (static_cast<double>(b - a) * step));
    }
    return even;
}

double peakOf(std::span<const double> values) {
    double peak = 0;
    for (const double value : values)
        peak = std::max(peak, value);
    return peak;
}

} // namespace whichway
