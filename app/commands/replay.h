// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>

namespace whichway {

/// `whichway replay`: rebuilds a session from its journal and says what holds. @return the exit code
int replay(const std::string& session);

} // namespace whichway
