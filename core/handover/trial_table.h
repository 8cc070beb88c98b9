// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/session_state.h"

#include <string>

namespace whichway {

/// One row a standing answer, in the order they were given. The columns are an allow-list: no participant
/// code, no session id, no date, no free text. `codebook` says what each of them means.
std::string trialTable(const SessionState& state);

/// The codebook of `trialTable` for this protocol: column, meaning, unit, values.
std::string codebook(const Protocol& protocol);

} // namespace whichway
