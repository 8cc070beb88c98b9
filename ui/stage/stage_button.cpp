// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/stage/stage_button.h"

#include "ui/look/tokens.h"

#include <QKeyEvent>
#include <QPainter>
#include <algorithm>

namespace whichway {
namespace {

constexpr int kRing = 8; ///< room around the outline: 4 px away, 4 px wide
constexpr double kKeyPixels = 19;
constexpr int kGap = 14, kCapPadding = 9, kPadding = 24;

QColor grey(QRgb value) {
    return QColor::fromRgb(value);
}

} // namespace

StageButton::StageButton(const QString& name, const QString& text, const QString& key, double pixels,
                         Order order, QWidget* parent)
    : QAbstractButton(parent), key_(key), pixels_(pixels), order_(order) {
    setObjectName(name);
    setText(text);
    setAccessibleName(text);
    setFont(stageFont(pixels));
    setFocusPolicy(Qt::TabFocus);
    setAttribute(Qt::WA_Hover);
}

void StageButton::setKey(const QString& key) {
    key_ = key;
    update();
}

void StageButton::setChosen(bool chosen) {
    if (chosen_ == chosen)
        return;
    chosen_ = chosen;
    // Said in words too, since a screen reader sees no black.
    setAccessibleDescription(chosen ? tr("chosen") : QString());
    update();
}

double StageButton::capWidth() const {
    if (key_.isEmpty())
        return 0;
    const QFontMetrics metrics(stageFont(kKeyPixels));
    return std::max(metrics.horizontalAdvance(key_) + 2 * kCapPadding, metrics.height() + 6);
}

double StageButton::contentWidth() const {
    double width = QFontMetrics(font()).horizontalAdvance(text());
    if (!key_.isEmpty())
        width += kGap + capWidth();
    if (icon_)
        width += kGap + pixels_;
    return width;
}

QSize StageButton::sizeHint() const {
    const int height = std::max(44, QFontMetrics(font()).height() + 20);
    return {static_cast<int>(contentWidth()) + 2 * kPadding + 2 * kRing, height + 2 * kRing};
}

void StageButton::keyPressEvent(QKeyEvent* event) {
    if (event->key() == Qt::Key_Return || event->key() == Qt::Key_Enter)
        click();
    else
        event->ignore();
}

void StageButton::drawCap(QPainter& painter, const QRectF& cap, const QColor& ink) const {
    painter.setPen(QPen(ink, 1.2));
    painter.setBrush(Qt::NoBrush);
    painter.drawRoundedRect(cap, 4, 4);
    painter.setFont(stageFont(kKeyPixels));
    painter.drawText(cap, Qt::AlignCenter, key_);
}

void StageButton::drawTick(QPainter& painter, const QPointF& centre, const QColor& ink) const {
    painter.setPen(QPen(ink, 2.5));
    const QPointF tick[] = {centre + QPointF(-7, 0), centre + QPointF(-2, 5), centre + QPointF(7, -6)};
    painter.drawPolyline(tick, 3);
}

void StageButton::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    const QRectF body = QRectF(rect()).adjusted(kRing, kRing, -kRing, -kRing);
    const bool lit = chosen_;
    const QColor ink = grey(lit           ? stage_grey::kRobot
                            : isEnabled() ? stage_grey::kText
                                          : stage_grey::kDisabledText);
    if (lit) {
        painter.setPen(QPen(grey(stage_grey::kEdge), 2));
        painter.setBrush(grey(stage_grey::kEdge));
    } else if (isEnabled()) {
        painter.setPen(QPen(grey(stage_grey::kEdge), 2));
        painter.setBrush(grey(underMouse() || isDown() ? stage_grey::kFloor : stage_grey::kButton));
    } else {
        QPen pen(grey(stage_grey::kDisabledEdge), 1.5);
        pen.setDashPattern({5, 3});
        painter.setPen(pen);
        painter.setBrush(Qt::NoBrush);
    }
    painter.drawRoundedRect(body.adjusted(1, 1, -1, -1), 4, 4);
    if (hasFocus()) {
        painter.setPen(QPen(grey(stage_grey::kText), 4));
        painter.setBrush(Qt::NoBrush);
        painter.drawRoundedRect(QRectF(rect()).adjusted(2, 2, -2, -2), 6, 6);
    }

    const QFontMetrics metrics(font());
    const double capHeight = QFontMetrics(stageFont(kKeyPixels)).height() + 4;
    const double wordWidth = metrics.horizontalAdvance(text());
    if (order_ == Order::KeyAbove) {
        drawCap(painter, {body.center().x() - capWidth() / 2, body.top() + 6, capWidth(), capHeight}, ink);
        painter.setPen(ink);
        painter.setFont(font());
        painter.drawText(body.adjusted(4, capHeight + 8, -4, -4),
                         Qt::AlignHCenter | Qt::AlignTop | Qt::TextWordWrap, text());
        return;
    }
    double x = body.center().x() - contentWidth() / 2;
    const double y = body.center().y();
    const auto cap = [&] {
        if (key_.isEmpty())
            return;
        drawCap(painter, {x, y - capHeight / 2, capWidth(), capHeight}, ink);
        x += capWidth() + kGap;
    };
    const auto word = [&] {
        painter.setPen(ink);
        painter.setFont(font());
        painter.drawText(QRectF(x, body.top(), wordWidth + 2, body.height()), Qt::AlignVCenter, text());
        x += wordWidth + kGap;
    };
    const auto icon = [&] {
        if (!icon_)
            return;
        drawIcon(painter, {x, y - pixels_ / 2, pixels_, pixels_}, *icon_, ink);
        x += pixels_ + kGap;
    };
    icon();
    if (order_ == Order::KeyFirst) {
        cap();
        word();
        if (lit)
            drawTick(painter, {x + 8, y}, ink);
    } else {
        if (lit)
            drawTick(painter, {x - kGap - 8, y}, ink);
        word();
        cap();
    }
}

} // namespace whichway
