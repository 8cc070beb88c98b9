// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QFrame>
#include <QScrollArea>

class QVBoxLayout;

namespace whichway {

/// A page that scrolls below its frame. `content` gets the page's margins and ground.
QScrollArea* makeScrollingPage(const QString& name, QWidget* content);

/// A framed part of a page: tone "empty" (dashed), "plain", "warn" or "bad".
QFrame* makePanel(const QString& name, const QString& tone);

/// A thin rule between two parts.
QFrame* makePageRule();

/// Takes all items out of a layout and deletes their widgets.
void clearLayout(QLayout& layout);

} // namespace whichway
