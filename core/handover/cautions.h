// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>
#include <vector>

namespace whichway {

/// What is shown before a session and printed wherever weights leave the program.
std::vector<std::string> cautions();

} // namespace whichway
