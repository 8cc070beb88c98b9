// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/bench/bench_parts.h"

#include "ui/look/key_button.h"
#include "ui/look/style.h"

#include <QHBoxLayout>
#include <QLabel>
#include <QVBoxLayout>
#include <QVariant>

namespace whichway {

QFrame* makeRule() {
    auto* rule = new QFrame;
    rule->setProperty("rule", true);
    rule->setFixedHeight(1);
    return rule;
}

FactTable::FactTable(const QString& name, QWidget* parent) : QWidget(parent), rows_(new QVBoxLayout(this)) {
    setObjectName(name);
    rows_->setContentsMargins(0, 0, 0, 0);
    rows_->setSpacing(0);
}

QLabel* FactTable::addRow(const QString& name) {
    if (count_++ > 0)
        rows_->addWidget(makeRule());
    auto* row = new QHBoxLayout;
    row->setContentsMargins(0, 5, 0, 5);
    row->setSpacing(space::k12);
    QLabel* heading = makeLabel(name, TextRole::Text, Ink::Second);
    heading->setFixedWidth(heading->fontMetrics().averageCharWidth() * 14);
    QLabel* content = makeLabel({}, TextRole::Text);
    content->setObjectName(objectName() + QLatin1Char('.') + QString::number(count_));
    content->setAccessibleName(name);
    heading->setAlignment(Qt::AlignTop | Qt::AlignLeft);
    row->addWidget(heading);
    row->addWidget(content, 1);
    rows_->addLayout(row);
    return content;
}

NoticeStrip::NoticeStrip(const QString& name, const QString& tone, QWidget* parent)
    : QFrame(parent), row_(new QHBoxLayout(this)), text_(makeLabel({}, TextRole::Text)) {
    setObjectName(name);
    setProperty("panel", tone);
    text_->setObjectName(name + QStringLiteral("Text"));
    row_->setContentsMargins(space::k16, space::k8, space::k12, space::k8);
    row_->setSpacing(space::k8);
    row_->addWidget(text_, 1);
    hide();
}

void NoticeStrip::setText(const QString& text) {
    text_->setText(text);
    setAccessibleName(text);
}

KeyButton* NoticeStrip::addAction(const QString& name, const QString& text,
                                  const std::function<void()>& action) {
    auto* button = new KeyButton(name, text);
    connect(button, &KeyButton::clicked, this, action);
    row_->addWidget(button);
    return button;
}

} // namespace whichway
