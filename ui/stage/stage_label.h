// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QLabel>

namespace whichway {

/// Text of the stage: plain (never HTML), near black, centred, word-wrapped. @param pixels size at 96 dpi
QLabel* stageLabel(const QString& name, double pixels, QWidget* parent);

} // namespace whichway
