// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/stage/stage_panel.h"

#include "ui/look/tokens.h"
#include "ui/stage/stage_button.h"
#include "ui/stage/stage_label.h"

#include <QLabel>
#include <QPainter>
#include <algorithm>

namespace whichway {
namespace {

constexpr int kPadding = 40, kGap = 24;

} // namespace

StagePanel::StagePanel(const QString& name, QWidget* parent)
    : QWidget(parent), heading_(stageLabel(name + QStringLiteral("Heading"), 26, this)),
      text_(stageLabel(name + QStringLiteral("Text"), 21, this)) {
    setObjectName(name);
    hide();
}

void StagePanel::setText(const QString& heading, const QString& text) {
    setAccessibleName(heading);
    heading_->setText(heading);
    text_->setText(text);
    if (isVisible())
        arrange();
}

StageButton* StagePanel::addAction(const QString& name, const QString& text, const QString& key,
                                   const std::function<void()>& action) {
    auto* button = new StageButton(name, text, key, 21, StageButton::Order::WordFirst, this);
    connect(button, &StageButton::clicked, this, action);
    actions_.push_back(button);
    return button;
}

void StagePanel::arrange() {
    const int width = std::min(parentWidget()->width() - 64, 860);
    const int inner = width - 2 * kPadding;
    int y = kPadding;
    for (QLabel* label : {heading_, text_}) {
        if (label->text().isEmpty()) {
            label->setGeometry(0, 0, 0, 0);
            continue;
        }
        const int height = label->heightForWidth(inner);
        label->setGeometry(kPadding, y, inner, height);
        y += height + kGap / 2;
    }
    y += kGap / 2;
    int total = 0, tallest = 0;
    for (const StageButton* button : actions_) {
        total += button->sizeHint().width() + kGap;
        tallest = std::max(tallest, button->sizeHint().height());
    }
    int x = (width - total + kGap) / 2;
    for (StageButton* button : actions_) {
        button->setGeometry(QRect(QPoint(x, y), button->sizeHint()));
        x += button->width() + kGap;
    }
    y += tallest + kPadding - 8;
    setGeometry((parentWidget()->width() - width) / 2, (parentWidget()->height() - y) / 2, width, y);
}

void StagePanel::open() {
    arrange();
    show();
    raise();
    if (!actions_.empty())
        actions_.front()->setFocus(Qt::OtherFocusReason);
}

void StagePanel::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setPen(QPen(QColor::fromRgb(stage_grey::kEdge), 2));
    painter.setBrush(QColor::fromRgb(stage_grey::kFloor));
    painter.drawRoundedRect(QRectF(rect()).adjusted(1, 1, -1, -1), 4, 4);
}

} // namespace whichway
