// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/handover/cautions.h"

namespace whichway {

std::vector<std::string> cautions() {
    return {
        "Preferences are not a safety case. A motion that people like can still be unsafe; limits on speed, "
        "force and "
        "separation come from the machine's own risk assessment (ISO 12100, ISO 10218, ISO/TS 15066, ISO "
        "13482) and "
        "from local rules.",
        "Sessions with people need the approval that local law and the institution's ethics board ask for, "
        "informed "
        "consent, and the right to stop.",
        "When a real robot plays the motions, a trained operator with an emergency stop is present.",
        "Weights are relative to this set of motions and its scaling; they are not comparable across "
        "studies.",
        "Fewer than 15 people: the results are informal.",
    };
}

} // namespace whichway
