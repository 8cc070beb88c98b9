// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/words.h"

#include <cmath>
#include <fmt/core.h>

namespace whichway {

std::string shortNumber(double value) {
    if (!std::isfinite(value))
        return "n/a";
    if (value == 0)
        return "0";
    const int digits = 2 - static_cast<int>(std::floor(std::log10(std::abs(value))));
    if (digits > 8 || digits < -12)
        return fmt::format("{:.2e}", value);
    std::string text = fmt::format("{:.{}f}", value, digits > 0 ? digits : 0);
    if (text.find('.') != std::string::npos) {
        text.erase(text.find_last_not_of('0') + 1);
        if (text.back() == '.')
            text.pop_back();
    }
    return text == "-0" ? "0" : text;
}

std::string withUnit(double value, const std::string& unit) {
    return unit.empty() || unit == "1" ? shortNumber(value) : shortNumber(value) + " " + unit;
}

std::string rangeWithUnit(double low, double high, const std::string& unit) {
    return shortNumber(low) + " to " + withUnit(high, unit);
}

std::string inSentence(const std::string& label) {
    std::string text = label;
    const auto isCapital = [](char c) { return c >= 'A' && c <= 'Z'; };
    if (text.size() > 1 && isCapital(text[0]) && !isCapital(text[1]))
        text[0] = static_cast<char>(text[0] - 'A' + 'a');
    return text;
}

} // namespace whichway
