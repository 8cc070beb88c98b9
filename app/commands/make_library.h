// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>

namespace whichway {

/// `whichway make-library`: makes the motions of a recipe. @return the exit code
int makeLibrary(const std::string& recipe, const std::string& folder);

} // namespace whichway
