// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/session/conductor.h"
#include "core/study/study.h"

#include <optional>
#include <string>

namespace whichway {

/// `whichway` and `whichway STUDY`: opens the window. @param study empty: none yet. @return the exit code
int openWindow(const std::string& study, int argc, char** argv);

/// Conducts one session in the windows: takes `resumed` up if there is one, else begins one by `setup`.
/// @return the exit code
int conductOnScreen(const Study& study, const SessionSetup& setup,
                    const std::optional<SessionFolder>& resumed, int argc, char** argv);

} // namespace whichway
