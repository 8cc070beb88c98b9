// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/nearest_name.h"

#include <algorithm>
#include <cstddef>
#include <vector>

namespace whichway {
namespace {

std::size_t distanceBetween(std::string_view a, std::string_view b) {
    std::vector<std::size_t> beforeLast(b.size() + 1), last(b.size() + 1), row(b.size() + 1);
    for (std::size_t j = 0; j <= b.size(); ++j)
        last[j] = j;
    for (std::size_t i = 1; i <= a.size(); ++i) {
        row[0] = i;
        for (std::size_t j = 1; j <= b.size(); ++j) {
            row[j] = std::min({last[j] + 1, row[j - 1] + 1, last[j - 1] + (a[i - 1] == b[j - 1] ? 0u : 1u)});
            if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1])
                row[j] = std::min(row[j], beforeLast[j - 2] + 1);
        }
        beforeLast.swap(last);
        last.swap(row);
    }
    return last[b.size()];
}

} // namespace

std::string nearestName(std::string_view name, std::span<const std::string> known) {
    std::string nearest;
    std::size_t least = std::string_view::npos;
    for (const std::string& candidate : known) {
        const std::size_t distance = distanceBetween(name.substr(0, 200), candidate);
        const std::size_t longer = std::max(name.size(), candidate.size());
        if (distance < least && distance <= (longer + 2) / 3) {
            least = distance;
            nearest = candidate;
        }
    }
    return nearest;
}

} // namespace whichway
