// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/motion/motion_painter.h"

#include "ui/look/tokens.h"

#include <QPaintDevice>
#include <QPainter>
#include <QPainterPath>
#include <algorithm>
#include <cmath>
#include <numbers>

namespace whichway {
namespace {

constexpr double kDotInterval = 0.5;   ///< s
constexpr double kMargin = 0.6;        ///< m around the states where no scene says what is drawn
constexpr double kRobotRadius = 0.25;  ///< m, where the scene gives no outline
constexpr double kPersonRadius = 0.25; ///< m
constexpr double kWalkingSpeed = 0.1;  ///< m/s, above which a person's direction is drawn
constexpr std::size_t kKeptLayers = 6;

QColor grey(QRgb value) {
    return QColor::fromRgb(value);
}

/// Smallest rectangle around all states of a motion and the people in it.
Rectangle extentOf(const Trajectory& motion) {
    double x1 = INFINITY, y1 = INFINITY, x2 = -INFINITY, y2 = -INFINITY;
    const auto take = [&](const std::vector<double>& xs, const std::vector<double>& ys) {
        for (const double x : xs)
            x1 = std::min(x1, x), x2 = std::max(x2, x);
        for (const double y : ys)
            y1 = std::min(y1, y), y2 = std::max(y2, y);
    };
    take(motion.x, motion.y);
    for (const PersonTrack& person : motion.people)
        take(person.x, person.y);
    if (!(x1 <= x2 && y1 <= y2))
        return {0, 0, 1, 1};
    return {x1 - kMargin, y1 - kMargin, x2 - x1 + 2 * kMargin, y2 - y1 + 2 * kMargin};
}

Rectangle unionOf(const Rectangle& a, const Rectangle& b) {
    const double x = std::min(a.x, b.x), y = std::min(a.y, b.y);
    return {x, y, std::max(a.x + a.width, b.x + b.width) - x, std::max(a.y + a.height, b.y + b.height) - y};
}

/// Indices of the samples up to `seconds` from the start.
std::size_t samplesUntil(const Trajectory& motion, double seconds) {
    const auto end = std::upper_bound(motion.time.begin(), motion.time.end(), motion.time.front() + seconds);
    return static_cast<std::size_t>(end - motion.time.begin());
}

void paintPersonTrail(QPainter& painter, const PersonTrack& person, std::size_t samples,
                      const Instant::Position& now, const PlaneView& view) {
    if (samples == 0 || std::hypot(now.x - person.x.front(), now.y - person.y.front()) < 0.05)
        return;
    QPolygonF trail;
    for (std::size_t i = 0; i < samples; ++i)
        trail << view.toPixels(person.x[i], person.y[i]);
    trail << view.toPixels(now.x, now.y);
    painter.setPen(QPen(grey(stage_grey::kPersonTrail), 1.5, Qt::DotLine));
    painter.setBrush(Qt::NoBrush);
    painter.drawPolyline(trail);
}

void paintPerson(QPainter& painter, const Instant::Position& at, const Instant::Position& before,
                 double elapsed, double radius, const PlaneView& view) {
    const QPointF centre = view.toPixels(at.x, at.y);
    const double r = std::max(4.0, radius * view.pixelsPerMeter);
    painter.setPen(QPen(grey(stage_grey::kRobot), 1.5));
    painter.setBrush(grey(stage_grey::kPerson));
    painter.drawEllipse(centre, r, r);
    const double dx = at.x - before.x, dy = at.y - before.y;
    if (elapsed <= 0 || std::hypot(dx, dy) / elapsed < kWalkingSpeed)
        return;
    painter.save();
    painter.translate(centre);
    painter.rotate(-std::atan2(dy, dx) * 180 / std::numbers::pi);
    painter.setPen(Qt::NoPen);
    painter.setBrush(grey(stage_grey::kRobot));
    const QPointF nose[] = {{r * 0.7, 0}, {r * 0.05, r * 0.42}, {r * 0.05, -r * 0.42}};
    painter.drawPolygon(nose, 3);
    painter.restore();
}

void paintTrail(QPainter& painter, const Trajectory& motion, std::size_t samples, const Instant& now,
                double seconds, const PlaneView& view) {
    QPolygonF trail;
    for (std::size_t i = 0; i < samples; ++i)
        trail << view.toPixels(motion.x[i], motion.y[i]);
    trail << view.toPixels(now.x, now.y);
    const double width = std::clamp(0.03 * view.pixelsPerMeter, 1.0, 2.5);
    painter.setPen(QPen(grey(stage_grey::kTrail), width));
    painter.setBrush(Qt::NoBrush);
    painter.drawPolyline(trail);
    painter.setPen(Qt::NoPen);
    painter.setBrush(grey(stage_grey::kTrail));
    const double until = std::min(seconds, motion.duration());
    for (int i = 0; i * kDotInterval <= until + 1e-9; ++i) {
        const Instant dot = instantAt(motion, i * kDotInterval);
        painter.drawEllipse(view.toPixels(dot.x, dot.y), 1.8 * width, 1.8 * width);
    }
}

void paintRobot(QPainter& painter, const Instant& now, const Scene& scene, const PlaneView& view) {
    const double k = view.pixelsPerMeter;
    painter.save();
    painter.translate(view.toPixels(now.x, now.y));
    painter.rotate(-now.heading * 180 / std::numbers::pi);
    const double line = std::clamp(0.03 * k, 1.2, 3.0);
    painter.setPen(QPen(grey(stage_grey::kEdge), line, Qt::SolidLine, Qt::FlatCap, Qt::MiterJoin));
    painter.setBrush(grey(stage_grey::kRobot));
    double front = 0;
    if (scene.robotLength > 0 && scene.robotWidth > 0) {
        const double l = std::max(8.0, scene.robotLength * k), w = std::max(6.0, scene.robotWidth * k);
        painter.drawRoundedRect(QRectF(-l / 2, -w / 2, l, w), std::min(3.0, w / 5), std::min(3.0, w / 5));
        front = l / 2;
        painter.setPen(QPen(grey(stage_grey::kPersonTrail), std::max(1.0, line / 2)));
        painter.drawLine(QPointF(-l / 6, -w / 2 + line), QPointF(-l / 6, w / 2 - line));
    } else {
        front = std::max(5.0, (scene.robotRadius > 0 ? scene.robotRadius : kRobotRadius) * k);
        painter.drawEllipse(QPointF(0, 0), front, front);
    }
    painter.setPen(QPen(grey(stage_grey::kEdge), line));
    painter.setBrush(Qt::NoBrush);
    const double size = front * 0.34;
    const QPointF chevron[] = {{front * 0.82 - size, -size}, {front * 0.82, 0}, {front * 0.82 - size, size}};
    painter.drawPolyline(chevron, 3);
    painter.restore();
}

} // namespace

MotionPainter::MotionPainter(const Study& study) {
    for (const Scene& scene : study.protocol.scenes)
        places_[scene.name] = {.bounds = scene.bounds, .scene = scene, .isScene = true};
    for (const Trajectory& motion : study.motions) {
        const Scene* scene = study.sceneOf(motion);
        const std::string key = scene ? scene->name : std::string();
        const Rectangle extent = extentOf(motion);
        auto [place, isNew] = places_.try_emplace(key, Place{.bounds = extent});
        const Rectangle& bounds = place->second.bounds;
        if (!isNew && (!place->second.isScene || bounds.width <= 0 || bounds.height <= 0))
            place->second.bounds = bounds.width > 0 && bounds.height > 0 ? unionOf(bounds, extent) : extent;
    }
    double widest = 0;
    for (const auto& [name, place] : places_)
        widest = std::max(widest, place.bounds.width / std::max(1e-9, place.bounds.height));
    if (widest > 0)
        aspect_ = std::clamp(widest, 1.2, 2.4);
}

const MotionPainter::Place& MotionPainter::placeOf(const Trajectory& motion) const {
    const auto place = places_.find(motion.scene);
    if (place != places_.end())
        return place->second;
    static const Place kNowhere{.bounds = {0, 0, 1, 1}};
    const auto none = places_.find("");
    return none == places_.end() ? kNowhere : none->second;
}

double MotionPainter::pixelsPerMeter(const QSizeF& pane,
                                     const std::vector<const Trajectory*>& motions) const {
    double scale = INFINITY;
    for (const Trajectory* motion : motions) {
        const Rectangle& bounds = placeOf(*motion).bounds;
        scale = std::min({scale, pane.width() / bounds.width, pane.height() / bounds.height});
    }
    return std::isfinite(scale) && scale > 0 ? scale : 1;
}

PlaneView MotionPainter::viewOf(const Place& place, const QSizeF& pane, double pixelsPerMeter) const {
    const Rectangle& b = place.bounds;
    return {.left = b.x + b.width / 2 - pane.width() / 2 / pixelsPerMeter,
            .top = b.y + b.height / 2 + pane.height() / 2 / pixelsPerMeter,
            .pixelsPerMeter = pixelsPerMeter};
}

void MotionPainter::paintScenery(QPainter& painter, const QRectF& pane, const Place& place,
                                 const PlaneView& view, Scenery scenery) const {
    const Scene* scene = place.isScene ? &place.scene : nullptr;
    if (scenery == Scenery::Drawn) {
        drawScene(painter, pane.size(), view, scene);
        return;
    }
    const double ratio = painter.device()->devicePixelRatioF();
    const Layer layer{.scene = place.scene.name,
                      .size = pane.size().toSize(),
                      .scale = view.pixelsPerMeter,
                      .ratio = ratio};
    auto kept =
        std::find_if(layers_.begin(), layers_.end(), [&](const auto& one) { return one.first == layer; });
    if (kept == layers_.end()) {
        QPixmap pixels((pane.size() * ratio).toSize());
        pixels.setDevicePixelRatio(ratio);
        QPainter scenePainter(&pixels);
        scenePainter.setRenderHint(QPainter::Antialiasing);
        drawScene(scenePainter, pane.size(), view, scene);
        scenePainter.end();
        layers_.insert(layers_.begin(), {layer, pixels});
        if (layers_.size() > kKeptLayers)
            layers_.pop_back();
        kept = layers_.begin();
    }
    painter.drawPixmap(QPointF(0, 0), kept->second);
}

void MotionPainter::paint(QPainter& painter, const QRectF& pane, const Trajectory& motion, double seconds,
                          double pixelsPerMeter, Scenery scenery) const {
    if (motion.time.empty() || pane.isEmpty())
        return;
    const Place& place = placeOf(motion);
    const PlaneView view = viewOf(place, pane.size(), pixelsPerMeter);
    const double at = std::clamp(seconds, 0.0, motion.duration());
    const Instant now = instantAt(motion, at);
    // Which way a person walks is seen from where they were a moment ago, or soon will be.
    const double earlier = at >= 0.1 ? at - 0.1 : at;
    const double later = at >= 0.1 ? at : std::min(at + 0.1, motion.duration());
    const Instant from = instantAt(motion, earlier), to = instantAt(motion, later);
    const std::size_t samples = samplesUntil(motion, at);
    const double personRadius = place.scene.personRadius > 0 ? place.scene.personRadius : kPersonRadius;

    painter.save();
    painter.setClipRect(pane, Qt::IntersectClip);
    painter.translate(pane.topLeft());
    painter.setRenderHint(QPainter::Antialiasing);
    paintScenery(painter, pane, place, view, scenery);
    for (std::size_t i = 0; i < motion.people.size(); ++i)
        paintPersonTrail(painter, motion.people[i], samples, now.people[i], view);
    paintTrail(painter, motion, samples, now, at, view);
    for (std::size_t i = 0; i < motion.people.size(); ++i) {
        const double dx = to.people[i].x - from.people[i].x, dy = to.people[i].y - from.people[i].y;
        const Instant::Position before{now.people[i].x - dx, now.people[i].y - dy};
        paintPerson(painter, now.people[i], before, later - earlier, personRadius, view);
    }
    paintRobot(painter, now, place.scene, view);
    painter.restore();
}

} // namespace whichway
