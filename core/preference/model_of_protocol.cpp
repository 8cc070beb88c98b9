// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/model_of_protocol.h"

namespace whichway {

ResponseModel responseModelOf(const Protocol& protocol) {
    ResponseModel model;
    model.dimension = static_cast<int>(protocol.features.size());
    model.levels = protocol.levels;
    model.cannotTell = protocol.cannotTell;
    model.lapse = protocol.model.lapse;
    if (protocol.model.scale == WeightScale::Fixed)
        model.scaleDeviation = 0;
    if (!protocol.model.sideBias)
        model.sideBiasDeviation = 0;
    return model;
}

} // namespace whichway
