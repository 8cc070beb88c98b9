// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string_view>

namespace whichway {

/// Whether `unit` is written so that a reader of the report knows it: "1" for a number without a unit, or
/// known symbols with an optional power ("m2"), joined by "*" and at most one "/": "m/s", "m/s3", "N*m",
/// "kg*m2/s". Symbols: of the SI brochure (9th edition, 2019) m s kg g rad N J W Hz Pa K A V C lm lx and the
/// non-SI min h l dB deg, with the prefixes that stand in units of daily use: mm cm km ms us mg kN kJ kW kHz
/// kPa mA mV. And "%".
bool isUnit(std::string_view unit);

/// What to write, for a remedy: one English sentence.
inline constexpr const char* kUnitRemedy = "Write SI symbols such as “s”, “m”, “m/s”, “m/s2”, “rad”, “N”, "
                                           "“J”, “W”, “dB”, “%”, or “1” for a number without "
                                           "a unit.";

} // namespace whichway
