// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/look/tokens.h"

#include <QFontInfo>
#include <QGuiApplication>
#include <algorithm>

namespace whichway {
namespace {

constexpr double kUsualPixels = 13.34; ///< 10 pt at 96 dpi

const Colours& light() {
    static const Colours colours{
        .ground = "#E9ECEA",
        .sheet = "#FAFBFA",
        .raised = "#FFFFFF",
        .ink = "#1A201E",
        .ink2 = "#4A5451",
        .ink3 = "#5E6865",
        .line = "#CDD3D0",
        .edge = "#77827E",
        .accent = "#0B5963",
        .onAccent = "#FFFFFF",
        .soft = "#DAE8E8",
        .warn = "#7A4F00",
        .warnSoft = "#F5EAD0",
        .bad = "#9E2419",
        .badSoft = "#F6E2DE",
        .series2 = "#C0540B",
        .series3 = "#7C5FB8",
        .series4 = "#5C5200",
        .ref = "#7F8986",
    };
    return colours;
}

const Colours& dark() {
    static const Colours colours{
        .ground = "#121615",
        .sheet = "#191E1D",
        .raised = "#222827",
        .ink = "#E5EBE8",
        .ink2 = "#B4BEBA",
        .ink3 = "#95A09C",
        .line = "#343C39",
        .edge = "#74807C",
        .accent = "#6DC4CE",
        .onAccent = "#0B1718",
        .soft = "#15393D",
        .warn = "#E2B45C",
        .warnSoft = "#382D15",
        .bad = "#F29A90",
        .badSoft = "#42211D",
        .series2 = "#EE8B42",
        .series3 = "#A58BE6",
        .series4 = "#E9DC86",
        .ref = "#7E8985",
    };
    return colours;
}

double factorOf(TextRole role) {
    switch (role) {
    case TextRole::Title:
        return 2.0;
    case TextRole::Statement:
        return 1.4;
    case TextRole::Heading:
        return 1.05;
    case TextRole::Text:
        return 1.0;
    case TextRole::Label:
        return 0.9;
    case TextRole::Note:
        return 0.85;
    }
    return 1.0;
}

} // namespace

const Colours& coloursOf(Theme theme) {
    return theme == Theme::Light ? light() : dark();
}

const Colours& coloursOf(const QPalette& palette) {
    return coloursOf(palette.color(QPalette::Window).lightness() < 128 ? Theme::Dark : Theme::Light);
}

QPalette paletteOf(Theme theme) {
    const Colours& colours = coloursOf(theme);
    QPalette palette;
    palette.setColor(QPalette::Window, colours.ground);
    palette.setColor(QPalette::Base, colours.raised);
    palette.setColor(QPalette::AlternateBase, colours.sheet);
    palette.setColor(QPalette::Button, colours.raised);
    palette.setColor(QPalette::ToolTipBase, colours.raised);
    for (const auto role :
         {QPalette::WindowText, QPalette::Text, QPalette::ButtonText, QPalette::ToolTipText})
        palette.setColor(role, colours.ink);
    palette.setColor(QPalette::PlaceholderText, colours.ink3);
    palette.setColor(QPalette::Highlight, colours.accent);
    palette.setColor(QPalette::HighlightedText, colours.onAccent);
    palette.setColor(QPalette::Link, colours.accent);
    palette.setColor(QPalette::Mid, colours.edge);
    palette.setColor(QPalette::Midlight, colours.line);
    palette.setColor(QPalette::Light, colours.raised);
    palette.setColor(QPalette::Dark, colours.edge);
    palette.setColor(QPalette::Shadow, colours.edge);
    for (const auto role : {QPalette::WindowText, QPalette::Text, QPalette::ButtonText})
        palette.setColor(QPalette::Disabled, role, colours.ink3);
    return palette;
}

QFont fontOf(TextRole role) {
    QFont font = QGuiApplication::font();
    const double factor = factorOf(role);
    if (font.pointSizeF() > 0)
        font.setPointSizeF(std::max(8.0, font.pointSizeF() * factor));
    else
        font.setPixelSize(std::max(11, qRound(font.pixelSize() * factor)));
    font.setBold(role == TextRole::Heading);
    return font;
}

double stageScale() {
    return std::max(1.0, QFontInfo(QGuiApplication::font()).pixelSize() / kUsualPixels);
}

QFont stageFont(double pixels) {
    QFont font = QGuiApplication::font();
    font.setBold(false);
    font.setPixelSize(qRound(std::max(19.0, pixels) * stageScale()));
    return font;
}

} // namespace whichway
