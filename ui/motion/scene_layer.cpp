// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/motion/scene_layer.h"

#include "ui/look/tokens.h"

#include <QPainter>
#include <QPainterPath>
#include <algorithm>
#include <cmath>
#include <numbers>

namespace whichway {
namespace {

constexpr double kWallMeters = 0.1;

QRectF pixelsOf(const Rectangle& r, const PlaneView& view) {
    return {view.toPixels(r.x, r.y + r.height), QSizeF(r.width, r.height) * view.pixelsPerMeter};
}

void drawGrid(QPainter& painter, const QSizeF& size, const PlaneView& view) {
    painter.fillRect(QRectF(QPointF(0, 0), size), QColor::fromRgb(stage_grey::kFloor));
    painter.setPen(QPen(QColor::fromRgb(stage_grey::kRoom), 1));
    const double right = view.left + size.width() / view.pixelsPerMeter;
    const double bottom = view.top - size.height() / view.pixelsPerMeter;
    // A library in odd units could ask for a line on every pixel.
    const double step = std::max(1.0, std::ceil(8 / view.pixelsPerMeter));
    for (double x = std::ceil(view.left / step) * step; x < right; x += step)
        painter.drawLine(QPointF(view.toPixels(x, 0).x(), 0),
                         QPointF(view.toPixels(x, 0).x(), size.height()));
    for (double y = std::ceil(bottom / step) * step; y < view.top; y += step)
        painter.drawLine(QPointF(0, view.toPixels(0, y).y()), QPointF(size.width(), view.toPixels(0, y).y()));
}

void drawDoor(QPainter& painter, const Door& door, const PlaneView& view) {
    const auto tip = [&](double angle) {
        return view.toPixels(door.x + door.width * std::cos(angle), door.y + door.width * std::sin(angle));
    };
    const QPointF hinge = view.toPixels(door.x, door.y);
    const double r = door.width * view.pixelsPerMeter;
    painter.drawLine(hinge, tip(door.open));
    const double degrees = 180 / std::numbers::pi;
    QPainterPath swing;
    swing.moveTo(tip(door.open));
    swing.arcTo(QRectF(hinge.x() - r, hinge.y() - r, 2 * r, 2 * r), door.open * degrees,
                (door.closed - door.open) * degrees);
    painter.drawPath(swing);
}

} // namespace

void drawScene(QPainter& painter, const QSizeF& size, const PlaneView& view, const Scene* scene) {
    if (!scene) {
        drawGrid(painter, size, view);
        return;
    }
    painter.fillRect(QRectF(QPointF(0, 0), size),
                     QColor::fromRgb(scene->floor.empty() ? stage_grey::kFloor : stage_grey::kRoom));
    for (const Rectangle& floor : scene->floor)
        painter.fillRect(pixelsOf(floor, view), QColor::fromRgb(stage_grey::kFloor));

    const QPen thin(QColor::fromRgb(stage_grey::kFurnitureEdge), 1);
    painter.setPen(thin);
    painter.setBrush(QColor::fromRgb(stage_grey::kFurniture));
    for (const Rectangle& piece : scene->furniture)
        painter.drawRoundedRect(pixelsOf(piece, view), 2, 2);
    painter.setBrush(Qt::NoBrush);
    for (const Door& door : scene->doors)
        drawDoor(painter, door, view);

    painter.setPen(QPen(QColor::fromRgb(stage_grey::kWall), std::max(2.0, kWallMeters * view.pixelsPerMeter),
                        Qt::SolidLine, Qt::SquareCap));
    for (const Segment& wall : scene->walls)
        painter.drawLine(view.toPixels(wall.x1, wall.y1), view.toPixels(wall.x2, wall.y2));

    if (scene->goal.size() == 2) {
        const QPointF goal = view.toPixels(scene->goal[0], scene->goal[1]);
        const double r = std::max(4.0, 0.15 * view.pixelsPerMeter);
        painter.setPen(QPen(QColor::fromRgb(stage_grey::kPersonTrail), 1.5));
        painter.drawEllipse(goal, r, r);
        painter.drawLine(goal - QPointF(r * 0.5, 0), goal + QPointF(r * 0.5, 0));
        painter.drawLine(goal - QPointF(0, r * 0.5), goal + QPointF(0, r * 0.5));
    }
}

} // namespace whichway
