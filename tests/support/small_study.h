// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/study.h"

#include <cstdint>

namespace whichway {

/// A whole study in memory, for tests that need no files: `motions` straight runs with `dimension` seeded
/// features, three practice motions and two catch pairs. Invented.
Study smallStudy(int motions = 30, int dimension = 3, std::uint64_t seed = 1);

} // namespace whichway
