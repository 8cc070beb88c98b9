// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/events.h"

#include <cstdint>

namespace whichway {

/// An event of the type at `index` of the variant with every field set at random: texts with quotes, control
/// characters and letters beyond ASCII, numbers of any magnitude. It need not make sense in a session.
Event randomEvent(std::size_t index, std::uint64_t seed);

/// `randomEvent` in a record of that number.
Record randomRecord(std::size_t index, std::uint64_t number, std::uint64_t seed);

} // namespace whichway
