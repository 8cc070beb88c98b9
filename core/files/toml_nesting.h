// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"

#include <string>
#include <string_view>

namespace whichway {

/// Deepest nesting of brackets, and most parts of one dotted key, that a TOML file of ours may have.
inline constexpr int kTomlNesting = 16;

/// Looks for nesting that would exhaust the stack of a recursive parser (dotted keys are tables within
/// tables, and the parser that we use bounds brackets only).
/// @return "toml.nesting" with the place of the bracket or dot that goes too deep.
/// Cost: O(length).
Result<void> checkTomlNesting(std::string_view content, const std::string& file);

} // namespace whichway
