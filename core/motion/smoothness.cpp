// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/smoothness.h"

#include <algorithm>
#include <cmath>
#include <complex>
#include <stdexcept>
#include <unsupported/Eigen/FFT>

namespace whichway {

double dimensionlessJerk(std::span<const double> speed, double rate) {
    if (speed.size() < 3 || !(rate > 0))
        throw std::invalid_argument("dimensionlessJerk: at least 3 samples at a positive rate");
    const double peak = std::abs(*std::max_element(
        speed.begin(), speed.end(), [](double a, double b) { return std::abs(a) < std::abs(b); }));
    if (!(peak > 0))
        throw std::invalid_argument("dimensionlessJerk: the speed is 0 throughout");
    const double duration = static_cast<double>(speed.size()) / rate;
    double sum = 0;
    for (std::size_t i = 2; i < speed.size(); ++i) {
        const double second = (speed[i] - 2 * speed[i - 1] + speed[i - 2]) * rate * rate;
        sum += second * second / rate;
    }
    return -duration * duration * duration / (peak * peak) * sum;
}

double spectralArcLength(std::span<const double> speed, double rate, double cutoff, double threshold,
                         int padLevel) {
    if (speed.size() < 2 || !(rate > 0))
        throw std::invalid_argument("spectralArcLength: at least 2 samples at a positive rate");
    std::size_t padded = 1;
    while (padded < speed.size())
        padded *= 2;
    padded <<= padLevel;
    std::vector<double> signal(padded, 0.0);
    std::copy(speed.begin(), speed.end(), signal.begin());
    Eigen::FFT<double> transform;
    std::vector<std::complex<double>> spectrum;
    transform.fwd(spectrum, signal);

    std::vector<double> magnitude(padded / 2 + 1);
    double largest = 0;
    for (std::size_t i = 0; i < magnitude.size(); ++i) {
        magnitude[i] = std::abs(spectrum[i]);
        largest = std::max(largest, magnitude[i]);
    }
    if (!(largest > 0))
        throw std::invalid_argument("spectralArcLength: the speed is 0 throughout");
    const double step = rate / static_cast<double>(padded);
    std::size_t first = magnitude.size(), last = 0;
    for (std::size_t i = 0; i < magnitude.size() && static_cast<double>(i) * step <= cutoff; ++i) {
        magnitude[i] /= largest;
        if (magnitude[i] >= threshold) {
            first = std::min(first, i);
            last = i;
        }
    }
    if (last <= first)
        return 0;
    const double across = 1 / static_cast<double>(last - first);
    double length = 0;
    for (std::size_t i = first + 1; i <= last; ++i)
        length += std::hypot(across, magnitude[i] - magnitude[i - 1]);
    return -length;
}

} // namespace whichway
