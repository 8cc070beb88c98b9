// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"
#include "core/journal/session_folder.h"
#include "core/result.h"

#include <string>

namespace whichway {

/// `whichway report`: writes the report, the trial table and the weights of a session into a folder, and the
/// report's path to standard output. @return the exit code
int report(const std::string& session, const std::string& folder, int argc, char** argv);

/// Writes a session's report into its own folder. Needs a QApplication. @return the folder of the report
Result<std::string> writeReportBeside(FileSystem& files, const SessionFolder& session);

} // namespace whichway
