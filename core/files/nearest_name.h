// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <span>
#include <string>
#include <string_view>

namespace whichway {

/// The known name that is most likely meant by `name`, or "" where none is near: the least optimal string
/// alignment distance (insertions, deletions, substitutions and swaps of neighbours, after Damerau 1964), at
/// most a third of the longer length and at least one edit; the first of equals. Cost: O(names length^2);
/// names longer than 64 bytes are near nothing.
std::string nearestName(std::string_view name, std::span<const std::string> known);

} // namespace whichway
