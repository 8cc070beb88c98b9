// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/title_block.h"

#include "ui/look/tokens.h"

#include <QPainter>
#include <algorithm>

namespace whichway {

TitleBlock::TitleBlock(QWidget* parent) : QWidget(parent) {
    setObjectName(QStringLiteral("titleBlock"));
    setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
}

void TitleBlock::setEntries(const QList<QPair<QString, QString>>& entries) {
    entries_ = entries;
    QStringList spoken;
    for (const auto& [name, content] : entries_)
        spoken << name + QLatin1Char(' ') + content;
    setAccessibleName(spoken.join(QStringLiteral(", ")));
    setToolTip(spoken.join(QLatin1Char('\n')));
    update();
}

QSize TitleBlock::sizeHint() const {
    return {400, std::max(space::kFoot, QFontMetrics(fontOf(TextRole::Note)).height() + 16)};
}

void TitleBlock::paintEvent(QPaintEvent*) {
    const Colours& c = coloursOf(palette());
    QPainter painter(this);
    painter.setFont(fontOf(TextRole::Note));
    const QFontMetrics metrics(painter.font());
    painter.setPen(c.line);
    painter.drawLine(0, 0, width(), 0);
    int x = 0;
    for (const auto& [name, content] : entries_) {
        const int nameWidth = name.isEmpty() ? 0 : metrics.horizontalAdvance(name) + 7;
        const int room = width() - x - 28 - nameWidth;
        if (room < 40)
            break;
        const QString shown = metrics.elidedText(content, Qt::ElideMiddle, room);
        x += 14;
        painter.setPen(c.ink3);
        painter.drawText(QRect(x, 0, nameWidth, height()), Qt::AlignVCenter, name);
        x += nameWidth;
        painter.setPen(c.ink2);
        painter.drawText(QRect(x, 0, room, height()), Qt::AlignVCenter, shown);
        x += metrics.horizontalAdvance(shown) + 14;
        painter.setPen(c.line);
        painter.drawLine(x, 0, x, height());
    }
}

} // namespace whichway
