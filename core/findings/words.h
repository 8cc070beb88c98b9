// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>

namespace whichway {

// How findings write numbers in their English sentences: three significant digits, a plain minus never
// hidden, the unit after a space ("1" for none).

std::string shortNumber(double value);                                       ///< "0.105", "12.3", "-4"
std::string withUnit(double value, const std::string& unit);                 ///< "0.1 m/s"
std::string rangeWithUnit(double low, double high, const std::string& unit); ///< "0.5 to 2 s"
/// A label inside a sentence: its first letter small unless the word is written in capitals.
std::string inSentence(const std::string& label);

} // namespace whichway
