// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/look/style.h"

#include "ui/look/icons.h"

#include <QApplication>
#include <QLabel>
#include <QStyleFactory>
#include <QVariant>

// Outside the namespace, as Q_INIT_RESOURCE asks.
static void initIcons() {
    Q_INIT_RESOURCE(icons);
}

namespace whichway {
namespace {

QString styleSheetOf(const Colours& c) {
    return QStringLiteral(
               "QWidget#sheet, QScrollArea#sheet, QScrollArea#sheet > QWidget > QWidget { background: %1; }"
               "QLineEdit, QComboBox, QPlainTextEdit { background: %2; border: 1px solid %3; border-radius: "
               "3px;"
               " padding: 5px 9px; min-height: 20px; selection-background-color: %4; }"
               "QLineEdit:focus, QComboBox:focus, QPlainTextEdit:focus { border: 2px solid %4; padding: 4px "
               "8px; }"
               "QTableView, QListView { background: %1; border: none; gridline-color: %5; outline: none;"
               " selection-background-color: %6; selection-color: %7; }"
               "QTableView:focus, QListView:focus { border: 2px solid %4; }"
               "QHeaderView { background: %1; }"
               "QHeaderView::section { background: %1; color: %8; border: none; border-bottom: 1px solid %5;"
               " padding: 4px 8px; }"
               "QFrame[panel=\"warn\"] { background: %9; border-radius: 3px; }")
               .arg(c.sheet.name(), c.raised.name(), c.edge.name(), c.accent.name(), c.line.name(),
                    c.soft.name(), c.ink.name(), c.ink2.name(), c.warnSoft.name()) +
           QStringLiteral("QFrame[panel=\"bad\"] { background: %1; border-radius: 3px; }"
                          "QFrame[panel=\"empty\"] { border: 1px dashed %2; border-radius: 3px; }"
                          "QRadioButton::indicator { width: 14px; height: 14px; border: 1px solid %2;"
                          " border-radius: 8px; background: %4; }"
                          "QRadioButton::indicator:checked { width: 6px; height: 6px; border: 5px solid %5; }"
                          "QRadioButton::indicator:focus { border-color: %5; }"
                          "QFrame[panel=\"plain\"] { border: 1px solid %3; border-radius: 3px; }"
                          "QScrollBar { background: transparent; border: none; margin: 0; }"
                          "QScrollBar:vertical { width: 10px; } QScrollBar:horizontal { height: 10px; }"
                          "QScrollBar::handle { background: %2; border-radius: 3px; margin: 2px;"
                          " min-height: 32px; min-width: 32px; }"
                          "QScrollBar::add-line, QScrollBar::sub-line { width: 0; height: 0; }"
                          "QScrollBar::add-page, QScrollBar::sub-page { background: transparent; }"
                          "QFrame[rule=\"true\"] { background: %3; border: none; }")
               .arg(c.badSoft.name(), c.edge.name(), c.line.name(), c.raised.name(), c.accent.name());
}

QColor colourOf(Ink ink, const Colours& c) {
    switch (ink) {
    case Ink::Usual:
        return c.ink;
    case Ink::Second:
        return c.ink2;
    case Ink::Third:
        return c.ink3;
    case Ink::Warn:
        return c.warn;
    case Ink::Bad:
        return c.bad;
    }
    return c.ink;
}

} // namespace

Theme systemTheme() {
    const QPalette palette = QGuiApplication::palette();
    return palette.color(QPalette::Window).lightness() < palette.color(QPalette::WindowText).lightness()
               ? Theme::Dark
               : Theme::Light;
}

void applyLook(QApplication& application, Theme theme) {
    initIcons();
    QApplication::setStyle(QStyleFactory::create(QStringLiteral("Fusion")));
    QApplication::setPalette(paletteOf(theme));
    QApplication::setWindowIcon(iconOf(Icon::Way, coloursOf(theme).accent));
    application.setStyleSheet(styleSheetOf(coloursOf(theme)));
}

void setInk(QLabel& label, Ink ink) {
    QPalette palette = label.palette();
    palette.setColor(QPalette::WindowText, colourOf(ink, coloursOf(QGuiApplication::palette())));
    label.setPalette(palette);
}

QLabel* makeLabel(const QString& text, TextRole role, Ink ink) {
    auto* label = new QLabel(text);
    label->setTextFormat(Qt::PlainText);
    label->setWordWrap(true);
    label->setFont(fontOf(role));
    setInk(*label, ink);
    return label;
}

} // namespace whichway
