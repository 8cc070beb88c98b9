// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/events.h"
#include "core/result.h"
#include "core/study/protocol.h"

#include <cstdint>
#include <vector>

namespace whichway {

/// Draws the schedule of a session, all of it fixed before the first answer:
/// practice pairs first; held-out pairs, drawn uniformly from the main library, spread over the whole
/// session; each repeat shows an earlier held-out pair with its sides swapped, at least five trials later
/// where the session is long enough; catch pairs spread; identical pairs in the second half; main trials
/// everywhere between. The lower row of the feature table stands left in two of every four main and held-out
/// trials (shuffled blocks).
/// @return "session.schedule" if the library has too few pairs for the held-out trials.
Result<std::vector<ScheduledTrial>> drawSchedule(const Protocol& protocol, std::uint64_t seed);

} // namespace whichway
