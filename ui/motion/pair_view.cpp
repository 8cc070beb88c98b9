// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/motion/pair_view.h"

#include "ui/look/tokens.h"

#include <QPainter>
#include <algorithm>

namespace whichway {

PairView::PairView(const QString& name, std::shared_ptr<const MotionPainter> painter,
                   std::function<double()> instant, QWidget* parent)
    : QWidget(parent), painter_(std::move(painter)), instant_(std::move(instant)) {
    setObjectName(name);
    setAccessibleName(tr("Two motions, side by side"));
    // The panes stay left and right in every language.
    setLayoutDirection(Qt::LeftToRight);
}

void PairView::show(const Trajectory* left, const Trajectory* right) {
    left_ = left;
    right_ = right;
    update();
}

void PairView::clear() {
    show(nullptr, nullptr);
}

void PairView::setGap(int pixels) {
    gap_ = pixels;
    update();
}

void PairView::setFrameRoom(int pixels) {
    frameRoom_ = pixels;
    update();
}

void PairView::setChosen(Side side) {
    if (chosen_ == side)
        return;
    chosen_ = side;
    update();
}

int PairView::heightFor(int width) const {
    return static_cast<int>(((width - gap_) / 2 - 2 * frameRoom_) / painter_->aspect()) + 2 * frameRoom_;
}

QRect PairView::pane(int side) const {
    const int paneWidth = (width() - gap_) / 2;
    const int x = side == 0 ? 0 : width() - paneWidth;
    return QRect(x, 0, paneWidth, height()).adjusted(frameRoom_, frameRoom_, -frameRoom_, -frameRoom_);
}

void PairView::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    const double seconds = instant_();
    const bool shown = left_ && right_;
    const double scale = shown ? painter_->pixelsPerMeter(leftPane().size(), {left_, right_}) : 1;
    for (int side = 0; side < 2; ++side) {
        const QRect box = pane(side);
        if (shown)
            painter_->paint(painter, box, side == 0 ? *left_ : *right_, seconds, scale);
        else
            painter.fillRect(box, QColor::fromRgb(stage_grey::kRoom));
        painter.setRenderHint(QPainter::Antialiasing, false);
        painter.setBrush(Qt::NoBrush);
        painter.setPen(QPen(QColor::fromRgb(stage_grey::kWall), 1));
        painter.drawRect(box.adjusted(0, 0, -1, -1));
    }
    if (chosen_ == Side::None || frameRoom_ < 6)
        return;
    const QRectF box = chosen_ == Side::Left ? leftPane() : rightPane();
    painter.setPen(QPen(QColor::fromRgb(stage_grey::kEdge), 4, Qt::SolidLine, Qt::SquareCap, Qt::MiterJoin));
    painter.drawRect(box.adjusted(-6, -6, 6, 6).adjusted(2, 2, -2, -2));
}

} // namespace whichway
