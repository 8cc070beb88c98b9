// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>

namespace whichway {

/// `whichway report`: writes the report, the trial table and the weights of a session into a folder, and the
/// report's path to standard output. @return the exit code
int report(const std::string& session, const std::string& folder, int argc, char** argv);

} // namespace whichway
