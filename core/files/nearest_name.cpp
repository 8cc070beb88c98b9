// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/nearest_name.h"

#include <algorithm>
#include <array>
#include <cstddef>

namespace whichway {

namespace {

constexpr std::size_t kLongest = 64;
using Row = std::array<std::size_t, kLongest + 1>;

std::size_t distance(std::string_view a, std::string_view b) {
    Row beforeLast = {}, last = {}, now = {};
    for (std::size_t j = 0; j <= b.size(); ++j)
        now[j] = j;
    for (std::size_t i = 1; i <= a.size(); ++i) {
        beforeLast = last;
        last = now;
        now[0] = i;
        for (std::size_t j = 1; j <= b.size(); ++j) {
            now[j] = std::min({last[j] + 1, now[j - 1] + 1, last[j - 1] + (a[i - 1] == b[j - 1] ? 0u : 1u)});
            if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1])
                now[j] = std::min(now[j], beforeLast[j - 2] + 1);
        }
    }
    return now[b.size()];
}

} // namespace

std::string nearestName(std::string_view name, std::span<const std::string> known) {
    std::string nearest;
    std::size_t least = kLongest;
    for (const std::string& candidate : known) {
        if (name.size() > kLongest || candidate.size() > kLongest)
            continue;
        const std::size_t edits = distance(name, candidate);
        const std::size_t allowed = std::max<std::size_t>(1, std::max(name.size(), candidate.size()) / 3);
        if (edits <= allowed && edits < least) {
            least = edits;
            nearest = candidate;
        }
    }
    return nearest;
}

} // namespace whichway
