// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/look/tokens.h"

#include <QFont>

namespace whichway {

/// How a chart is drawn: the tokens of a theme, and the font of its text in pixels.
struct ChartStyle {
    Colours colours = coloursOf(Theme::Light);
    QFont text = {};  ///< names of rows
    QFont label = {}; ///< ticks and notes
};

/// For paper: light, in pixels at 96 dpi.
inline ChartStyle paperStyle() {
    ChartStyle style;
    style.text = QFont(QStringLiteral("Noto Sans"));
    style.text.setPixelSize(12);
    style.label = style.text;
    style.label.setPixelSize(11);
    return style;
}

} // namespace whichway
