// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/line_reader.h"
#include "core/session/conductor.h"

#include <chrono>

namespace whichway {

/// Conducts a session over lines of JSON (core/session/line_protocol.h) on `in` and standard output.
/// @param resumed whether the session was taken up again
/// @param interval between a saved answer and the next pair: as long may the answer be undone
/// @return kDone when the session has ended; kInputAtFault when the input, or whoever reads the output, ended
/// before it did: then the session can be taken up again.
int converse(Conductor& conductor, bool resumed, LineReader& in, std::chrono::milliseconds interval);

} // namespace whichway
