// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/look/tokens.h"

class QApplication;
class QLabel;
class QString;

namespace whichway {

/// The theme that the system's own palette speaks for. To be asked before `applyLook`.
Theme systemTheme();

/// Gives the program its style, palette and icons. Once, before the first window.
void applyLook(QApplication& application, Theme theme);

enum class Ink { Usual, Second, Third, Warn, Bad };

/// A label of the pages: plain text (never HTML), word-wrapped.
QLabel* makeLabel(const QString& text, TextRole role, Ink ink = Ink::Usual);
void setInk(QLabel& label, Ink ink);

} // namespace whichway
