// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/study.h"
#include "ui/motion/scene_layer.h"

#include <QPixmap>
#include <QSizeF>
#include <map>
#include <string>
#include <vector>

class QPainter;

namespace whichway {

/// Draws motions from above, the same on the stage, the bench, in review and in print: the scene, people as
/// discs, the robot's outline, and its trail with a dot every 0.5 s, so that the dots' spacing is the speed.
/// Greys only. Both motions of a pair are drawn with equally many pixels a metre. Screen thread only. Cost of
/// `paint`: linear in the samples up to now; the scene is drawn once per size and kept.
class MotionPainter {
public:
    /// Takes what it needs of the study's scenes and extents; the study need not outlive it.
    explicit MotionPainter(const Study& study);

    /// Width by height of what is drawn of the study's widest scene: how a pane should be shaped.
    double aspect() const { return aspect_; }
    /// The scale at which each of the motions fits into a pane of that size.
    double pixelsPerMeter(const QSizeF& pane, const std::vector<const Trajectory*>& motions) const;

    enum class Scenery { Kept, Drawn }; ///< kept as pixels for screens, or drawn anew (for print)

    /// Paints `motion` as it is at `seconds` from its start into `pane` (whole pixels for screens).
    void paint(QPainter& painter, const QRectF& pane, const Trajectory& motion, double seconds,
               double pixelsPerMeter, Scenery scenery = Scenery::Kept) const;

private:
    struct Place {
        Rectangle bounds = {};
        Scene scene = {};
        bool isScene = false;
    };
    struct Layer {
        std::string scene = {};
        QSize size = {};
        double scale = 0, ratio = 0;
        bool operator==(const Layer&) const = default;
    };

    const Place& placeOf(const Trajectory& motion) const;
    PlaneView viewOf(const Place& place, const QSizeF& pane, double pixelsPerMeter) const;
    void paintScenery(QPainter& painter, const QRectF& pane, const Place& place, const PlaneView& view,
                      Scenery scenery) const;

    std::map<std::string, Place> places_; ///< by scene name; "" where there is no scene
    double aspect_ = 1.5;
    mutable std::vector<std::pair<Layer, QPixmap>> layers_; ///< the newest first, a handful
};

} // namespace whichway
