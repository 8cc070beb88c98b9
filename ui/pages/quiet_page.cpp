// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/quiet_page.h"

#include "ui/look/key_button.h"
#include "ui/look/style.h"
#include "ui/pages/page_parts.h"

#include <QHBoxLayout>
#include <QLabel>
#include <QVBoxLayout>

namespace whichway {

QuietPage::QuietPage(const QString& name, const QString& title, QWidget* parent)
    : QWidget(parent), heading_(makeLabel({}, TextRole::Statement)),
      text_(makeLabel({}, TextRole::Text, Ink::Second)) {
    auto* content = new QWidget;
    auto* page = new QVBoxLayout(content);
    page->setContentsMargins(space::k24, space::k16, space::k24, space::k24);
    page->setSpacing(space::k16);
    page->addWidget(makeLabel(title, TextRole::Title));
    auto* panel = makePanel(name + QStringLiteral(".panel"), QStringLiteral("empty"));
    panel->setMaximumWidth(760);
    auto* inside = new QVBoxLayout(panel);
    inside->setContentsMargins(space::k24, space::k24, space::k24, space::k24);
    inside->setSpacing(space::k12);
    heading_->setObjectName(name + QStringLiteral(".heading"));
    text_->setObjectName(name + QStringLiteral(".text"));
    inside->addWidget(heading_);
    inside->addWidget(text_);
    actions_ = new QHBoxLayout;
    actions_->setSpacing(space::k4);
    actions_->addStretch(1);
    inside->addLayout(actions_);
    page->addWidget(panel);
    page->addStretch(1);
    setObjectName(name);
    auto* whole = new QVBoxLayout(this);
    whole->setContentsMargins(0, 0, 0, 0);
    whole->addWidget(makeScrollingPage(title, content));
}

void QuietPage::setContent(const QString& heading, const QString& text) {
    heading_->setText(heading);
    text_->setText(text);
}

KeyButton* QuietPage::addAction(const QString& name, const QString& text, bool isMain,
                                const std::function<void()>& action) {
    auto* button = new KeyButton(name, text, isMain ? KeyButton::Weight::Main : KeyButton::Weight::Usual);
    connect(button, &KeyButton::clicked, this, action);
    actions_->insertWidget(actions_->count() - 1, button);
    return button;
}

} // namespace whichway
