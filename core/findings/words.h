// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>

namespace whichway {

// How numbers stand in core's English sentences: a decimal point, a true minus (U+2212), a no-break space
// before the unit; the unit "1" and the empty unit are not written.

/// Places after the point that show an interval of this width to two digits: 0 to 6.
int decimalsFor(double width);
/// "−0.44"; "unlimited" for an infinite value, "n/a" for NaN.
std::string spokenNumber(double value, int decimals);
/// The shortest plain form: "0.1", "25".
std::string spokenNumber(double value);
/// A unit as people write it: "m/s³" for "m/s3"; empty for "1".
std::string readableUnit(const std::string& unit);
/// "1.3 s".
std::string spokenQuantity(const std::string& number, const std::string& unit);
/// "1.9 to 5.0 s".
std::string spokenRange(double low, double high, int decimals, const std::string& unit);
/// A label inside a sentence: its first letter small unless its first word is written in capitals.
std::string inSentence(const std::string& label);

} // namespace whichway
