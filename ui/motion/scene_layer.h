// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/motion/scene.h"

#include <QRectF>

class QPainter;

namespace whichway {

/// From metres (y up) to pixels (y down) inside one pane. A value.
struct PlaneView {
    double left = 0, top = 0;    ///< m, of the pane's upper left corner
    double pixelsPerMeter = 100; ///< > 0, the same in x and y
    QPointF toPixels(double x, double y) const {
        return {(x - left) * pixelsPerMeter, (top - y) * pixelsPerMeter};
    }
};

/// Draws what stands still: floor, rooms, furniture, walls, doors and the goal, into a pane of `size` whose
/// upper left corner is the painter's origin. Without a scene it draws a floor with a line every metre.
void drawScene(QPainter& painter, const QSizeF& size, const PlaneView& view, const Scene* scene);

} // namespace whichway
