// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/random.h"

#include "core/numbers/special_functions.h"

#include <bit>
#include <stdexcept>

namespace whichway {
namespace {

std::uint64_t splitMix(std::uint64_t& state) {
    state += 0x9E3779B97F4A7C15ull;
    std::uint64_t z = state;
    z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9ull;
    z = (z ^ (z >> 27)) * 0x94D049BB133111EBull;
    return z ^ (z >> 31);
}

} // namespace

Random::Random(std::uint64_t seed) {
    for (auto& word : state_)
        word = splitMix(seed);
}

std::uint64_t Random::bits() {
    const std::uint64_t result = std::rotl(state_[1] * 5, 7) * 9;
    const std::uint64_t t = state_[1] << 17;
    state_[2] ^= state_[0];
    state_[3] ^= state_[1];
    state_[1] ^= state_[2];
    state_[0] ^= state_[3];
    state_[2] ^= t;
    state_[3] = std::rotl(state_[3], 45);
    return result;
}

double Random::uniform() {
    return (static_cast<double>(bits() >> 12) + 0.5) * 0x1.0p-52;
}

std::size_t Random::below(std::size_t end) {
    if (end == 0)
        throw std::invalid_argument("Random::below: end must be at least 1");
    const std::uint64_t n = end;
    const std::uint64_t limit = (0 - n) % n; // 2^64 mod n: the values below it would be drawn once too often
    std::uint64_t value = bits();
    while (value < limit)
        value = bits();
    return static_cast<std::size_t>(value % n);
}

double Random::normal() {
    return normalQuantile(uniform());
}

std::uint64_t deriveSeed(std::uint64_t seed, std::uint64_t part) {
    std::uint64_t state = seed;
    std::uint64_t mixed = splitMix(state) ^ (part * 0xD1B54A32D192ED03ull);
    return splitMix(mixed);
}

} // namespace whichway
