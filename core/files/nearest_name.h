// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <span>
#include <string>
#include <string_view>

namespace whichway {

/// The known name that differs from `name` by the fewest insertions, deletions, replacements and swaps of
/// neighbours (the optimal string alignment distance); empty if even that one differs in more than a third of
/// its letters.
std::string nearestName(std::string_view name, std::span<const std::string> known);

} // namespace whichway
