// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/page_parts.h"

#include <QLayout>
#include <QVariant>
#include <memory>

namespace whichway {

QScrollArea* makeScrollingPage(const QString& name, QWidget* content) {
    content->setObjectName(QStringLiteral("sheet"));
    auto* scroll = new QScrollArea;
    scroll->setObjectName(QStringLiteral("sheet"));
    scroll->setAccessibleName(name);
    scroll->setFrameShape(QFrame::NoFrame);
    scroll->setWidgetResizable(true);
    scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
    scroll->setFocusPolicy(Qt::NoFocus);
    scroll->setWidget(content);
    return scroll;
}

QFrame* makePanel(const QString& name, const QString& tone) {
    auto* panel = new QFrame;
    panel->setObjectName(name);
    panel->setProperty("panel", tone);
    return panel;
}

QFrame* makePageRule() {
    auto* rule = new QFrame;
    rule->setProperty("rule", true);
    rule->setFixedHeight(1);
    return rule;
}

void clearLayout(QLayout& layout) {
    while (std::unique_ptr<QLayoutItem> item{layout.takeAt(0)}) {
        if (QWidget* widget = item->widget()) {
            widget->hide();
            widget->deleteLater();
        } else if (QLayout* inner = item->layout()) {
            clearLayout(*inner);
        }
    }
}

} // namespace whichway
