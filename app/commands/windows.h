// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/commands/conduct.h"
#include "core/study/study.h"

namespace whichway {

/// `whichway` and `whichway STUDY`: opens the window. @param study empty: none yet. @return the exit code
int openWindow(const std::string& study, int argc, char** argv);

/// Conducts one session in the windows. @return the exit code
int conductOnScreen(const Study& study, const ConductOptions& options, int argc, char** argv);

} // namespace whichway
