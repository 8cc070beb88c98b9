// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"
#include "core/study/study.h"

#include <optional>
#include <string>

namespace whichway {

/// Reads a study; writes every problem, a line each, to standard error and gives nothing if there is any.
std::optional<Study> openStudy(const FileSystem& files, const std::string& folder,
                               const std::string& featuresFile = "");

} // namespace whichway
