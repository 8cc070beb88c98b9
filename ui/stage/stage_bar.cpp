// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/stage/stage_bar.h"

#include "ui/look/tokens.h"

#include <QPainter>
#include <algorithm>

namespace whichway {

StageBar::StageBar(std::function<double()> share, QWidget* parent)
    : QWidget(parent), share_(std::move(share)) {
    setObjectName(QStringLiteral("stage.bar"));
    setAccessibleName(QObject::tr("How far the motions have played"));
}

void StageBar::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    const double share = std::clamp(share_(), 0.0, 1.0);
    const int middle = height() / 2;
    const int end = static_cast<int>(share * width());
    painter.fillRect(QRect(0, middle - 2, width(), 4), QColor::fromRgb(stage_grey::kTrack));
    painter.fillRect(QRect(0, middle - 4, end, 8), QColor::fromRgb(stage_grey::kEdge));
}

} // namespace whichway
