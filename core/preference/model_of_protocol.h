// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/preference/response_model.h"
#include "core/study/protocol.h"

namespace whichway {

/// The response model that a protocol asks for.
ResponseModel responseModelOf(const Protocol& protocol);

} // namespace whichway
