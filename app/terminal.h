// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"

#include <string>
#include <string_view>

namespace whichway {

// What the program returns to the shell.
inline constexpr int kDone = 0;
inline constexpr int kInputAtFault = 1;
inline constexpr int kWrongUsage = 2;

/// Writes a line to standard output and flushes it. @return false if nobody reads it any more.
bool say(std::string_view line);

/// Writes a line to standard error.
void complain(std::string_view line);

/// Writes an error, and what to do about it, to standard error. @return kInputAtFault
int complain(const Error& error);

} // namespace whichway
