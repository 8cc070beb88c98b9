// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/stage/stage_label.h"

#include "ui/look/tokens.h"

namespace whichway {

QLabel* stageLabel(const QString& name, double pixels, QWidget* parent) {
    auto* label = new QLabel(parent);
    label->setObjectName(name);
    label->setTextFormat(Qt::PlainText);
    label->setWordWrap(true);
    label->setAlignment(Qt::AlignCenter);
    label->setFont(stageFont(pixels));
    QPalette palette = label->palette();
    palette.setColor(QPalette::WindowText, QColor::fromRgb(stage_grey::kText));
    label->setPalette(palette);
    return label;
}

} // namespace whichway
