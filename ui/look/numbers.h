// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QString>
#include <string>

namespace whichway {

// How numbers are written, the same on every screen and on paper: a decimal point, a true minus, a space of
// fixed width before the unit, and intervals as two numbers, never as a plus-minus.

/// "−0.44": `decimals` places; "not a number" becomes "n/a".
QString numberText(double value, int decimals);
/// As many places as give three digits that count, at most 3: "0.414", "12.3", "240".
QString shortNumber(double value);
/// "3.0 s"; the unit "1" and the empty unit are not written.
QString withUnit(double value, int decimals, const QString& unit);
/// A unit as it is read: "m/s³" of "m/s3"; empty for "1".
QString unitText(const std::string& unit);
/// "90 % interval 1.9 to 5.0 s".
QString intervalText(double low, double high, int decimals, const QString& unit, int percent = 90);
/// "18 min 42 s", "1 h 05 min", "42 s": whole seconds, for clocks.
QString spanText(double seconds);
/// "17 pairs", "1 pair". Both words are given, since plurals differ by language.
QString countText(int count, const QString& one, const QString& many);

} // namespace whichway
