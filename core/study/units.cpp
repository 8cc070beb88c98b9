// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/units.h"

#include <algorithm>

namespace whichway {

namespace {

constexpr std::string_view kSymbols[] = {"m",  "s",  "kg",  "g",   "rad", "N",  "J",  "W",   "Hz",
                                         "Pa", "K",  "A",   "V",   "C",   "lm", "lx", "min", "h",
                                         "l",  "dB", "deg", "mm",  "cm",  "km", "ms", "us",  "mg",
                                         "kN", "kJ", "kW",  "kHz", "kPa", "mA", "mV", "%"};

bool isFactor(std::string_view factor) {
    if (!factor.empty() && factor.back() >= '2' && factor.back() <= '9')
        factor.remove_suffix(1); // the power
    return std::find(std::begin(kSymbols), std::end(kSymbols), factor) != std::end(kSymbols);
}

bool isProduct(std::string_view product) {
    for (;;) {
        const std::size_t star = product.find('*');
        if (!isFactor(product.substr(0, star)))
            return false;
        if (star == std::string_view::npos)
            return true;
        product = product.substr(star + 1);
    }
}

} // namespace

bool isUnit(std::string_view unit) {
    if (unit == "1")
        return true;
    const std::size_t slash = unit.find('/');
    const std::string_view above = unit.substr(0, slash);
    if (slash == std::string_view::npos)
        return isProduct(above);
    return (above == "1" || isProduct(above)) && isProduct(unit.substr(slash + 1));
}

} // namespace whichway
