// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/study.h"

#include <algorithm>

namespace whichway {

const Trajectory* Study::motion(const std::string& name) const {
    const auto found = std::find_if(motions.begin(), motions.end(),
                                    [&](const Trajectory& motion) { return motion.name == name; });
    return found == motions.end() ? nullptr : &*found;
}

const Scene* Study::sceneOf(const Trajectory& motion) const {
    const auto found = std::find_if(protocol.scenes.begin(), protocol.scenes.end(),
                                    [&](const Scene& scene) { return scene.name == motion.scene; });
    return motion.scene.empty() || found == protocol.scenes.end() ? nullptr : &*found;
}

} // namespace whichway
