// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/words.h"

#include <algorithm>
#include <cmath>
#include <fmt/core.h>

namespace whichway {
namespace {

std::string withTrueMinus(std::string digits) {
    if (digits.empty() || digits.front() != '-')
        return digits;
    digits.erase(0, 1);
    const bool isZero = digits.find_first_not_of("0.") == std::string::npos;
    return isZero ? digits : "\u2212" + digits;
}

std::string beyondNumbers(double value) {
    if (std::isnan(value))
        return "n/a";
    return value < 0 ? "\u2212unlimited" : "unlimited";
}

} // namespace

int decimalsFor(double width) {
    if (!std::isfinite(width) || width <= 0)
        return 1;
    return std::clamp(1 - static_cast<int>(std::floor(std::log10(width))), 0, 6);
}

std::string spokenNumber(double value, int decimals) {
    return std::isfinite(value) ? withTrueMinus(fmt::format("{:.{}f}", value, decimals))
                                : beyondNumbers(value);
}

std::string spokenNumber(double value) {
    return std::isfinite(value) ? withTrueMinus(fmt::format("{:g}", value)) : beyondNumbers(value);
}

std::string readableUnit(const std::string& unit) {
    if (unit == "1")
        return {};
    std::string readable;
    for (const char c : unit)
        if (c == '2' || c == '3')
            readable += c == '2' ? "\u00b2" : "\u00b3";
        else
            readable += c;
    return readable;
}

std::string spokenQuantity(const std::string& number, const std::string& unit) {
    const std::string readable = readableUnit(unit);
    return readable.empty() ? number : number + "\u00a0" + readable;
}

std::string spokenRange(double low, double high, int decimals, const std::string& unit) {
    return spokenNumber(low, decimals) + " to " + spokenQuantity(spokenNumber(high, decimals), unit);
}

std::string inSentence(const std::string& label) {
    std::string text = label;
    const auto isCapital = [](char c) { return c >= 'A' && c <= 'Z'; };
    if (text.size() > 1 && isCapital(text[0]) && !isCapital(text[1]))
        text[0] = static_cast<char>(text[0] - 'A' + 'a');
    return text;
}

} // namespace whichway
