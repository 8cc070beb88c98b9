// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cstddef>
#include <cstdint>
#include <span>
#include <utility>

namespace whichway {

/// A seeded generator (xoshiro256**, Blackman and Vigna 2021, seeded by splitmix64) with its own
/// distributions: the same seed gives the same numbers on any machine, which the standard library's
/// distributions do not promise.
class Random {
public:
    explicit Random(std::uint64_t seed);

    std::uint64_t bits();               ///< 64 uniform bits.
    double uniform();                   ///< In the open interval (0, 1), odd multiples of 2^-53.
    std::size_t below(std::size_t end); ///< Uniform in [0, end), end >= 1, without modulo bias.
    double normal();                    ///< Standard normal, by the quantile function (one `uniform` each).

    template <typename T>
    void shuffle(std::span<T> items) {
        for (std::size_t n = items.size(); n > 1; --n)
            std::swap(items[n - 1], items[below(n)]);
    }

private:
    std::uint64_t state_[4];
};

/// A seed for the part called `part` of work that is seeded by `seed`: streams of different parts are
/// independent.
std::uint64_t deriveSeed(std::uint64_t seed, std::uint64_t part);

} // namespace whichway
