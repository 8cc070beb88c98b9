// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <bit>
#include <cstdint>

namespace whichway {

// The C library's exp and log change bits with the processor and with the library's version. These two use
// only
// +, -, *, / and bit patterns, which IEEE 754 fixes, and no branch, so that loops over them vectorise.

/// e^x, relative error below 4e-16 for |x| <= 700; below -708 the result is about 1e-308, above 709 about
/// 1e308.
inline double exactExp(double x) {
    constexpr double kInverseLn2 = 1.4426950408889634;
    constexpr double kLn2High = 6.93147180369123816490e-01; // ln 2 in two parts, the first with 20 zero bits
    constexpr double kLn2Low = 1.90821492927058770002e-10;
    constexpr double kRounder = 6755399441055744.0; // 1.5 * 2^52: adding it rounds to an integer
    x = x < -708.0 ? -708.0 : x;
    x = x > 709.0 ? 709.0 : x;
    const double shifted = x * kInverseLn2 + kRounder;
    const double n = shifted - kRounder;
    const double r = (x - n * kLn2High) - n * kLn2Low; // |r| <= ln 2 / 2
    // Taylor's series to the 13th power: the first term left out is below 5e-18.
    double p = 1.0 / 6227020800.0;
    p = p * r + 1.0 / 479001600.0;
    p = p * r + 1.0 / 39916800.0;
    p = p * r + 1.0 / 3628800.0;
    p = p * r + 1.0 / 362880.0;
    p = p * r + 1.0 / 40320.0;
    p = p * r + 1.0 / 5040.0;
    p = p * r + 1.0 / 720.0;
    p = p * r + 1.0 / 120.0;
    p = p * r + 1.0 / 24.0;
    p = p * r + 1.0 / 6.0;
    p = p * r + 0.5;
    p = p * r + 1.0;
    p = p * r + 1.0;
    // The integer n stands in the low bits of `shifted`; moved into the exponent it is 2^n.
    const std::uint64_t power = (std::bit_cast<std::uint64_t>(shifted) + 1023u) << 52;
    return p * std::bit_cast<double>(power);
}

/// ln x, error below 1.5 units in the last place, for normal x > 0 (the caller's duty: anything else gives
/// nonsense). The reduction and the minimax coefficients are those of the freely distributable mathematical
/// library (FDLIBM, e_log.c, Sun Microsystems 1993).
inline double exactLog(double x) {
    constexpr double kLn2High = 6.93147180369123816490e-01;
    constexpr double kLn2Low = 1.90821492927058770002e-10;
    const std::uint64_t bits = std::bit_cast<std::uint64_t>(x);
    // Take the exponent so that the mantissa falls in [sqrt(1/2), sqrt(2)).
    constexpr std::uint64_t kRootHalf = 0x3FE6A09E667F3BCDull;
    const std::uint64_t offset = bits - kRootHalf;
    const std::int64_t exponent = static_cast<std::int64_t>(offset) >> 52;
    const double mantissa = std::bit_cast<double>(bits - (static_cast<std::uint64_t>(exponent) << 52));
    const double k = static_cast<double>(static_cast<std::int32_t>(exponent));
    const double f = mantissa - 1.0;
    const double s = f / (2.0 + f);
    const double z = s * s;
    const double w = z * z;
    const double even =
        w * (3.999999999940941908e-01 + w * (2.222219843214978396e-01 + w * 1.531383769920937332e-01));
    const double odd =
        z * (6.666666666666735130e-01 +
             w * (2.857142874366239149e-01 + w * (1.818357216161805012e-01 + w * 1.479819860511658591e-01)));
    const double remainder = even + odd;
    const double half = 0.5 * f * f;
    return k * kLn2High - ((half - (s * (half + remainder) + k * kLn2Low)) - f);
}

} // namespace whichway
