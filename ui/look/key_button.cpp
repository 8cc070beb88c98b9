// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/look/key_button.h"

#include "ui/look/tokens.h"

#include <QKeyEvent>
#include <QPainter>
#include <QShortcut>
#include <algorithm>

namespace whichway {
namespace {

constexpr int kFocusRoom = 4; ///< around the outline, for the focus ring
constexpr int kPadding = 14, kGap = 9, kIconSize = 18, kCapPadding = 6;

} // namespace

KeyButton::KeyButton(const QString& name, const QString& text, Weight weight, std::optional<Icon> icon,
                     const QKeySequence& key, QWidget* parent)
    : QAbstractButton(parent), weight_(weight), icon_(icon), key_(key) {
    setObjectName(name);
    setText(text);
    setAccessibleName(text);
    setFont(fontOf(TextRole::Text));
    setFocusPolicy(Qt::StrongFocus);
    setAttribute(Qt::WA_Hover);
    setSizePolicy(QSizePolicy::Fixed, QSizePolicy::Fixed);
    if (!key.isEmpty()) {
        // Not the button's own shortcut: that one clicks a tenth of a second late and is lost with a new
        // text.
        auto* shortcut = new QShortcut(key, this);
        connect(shortcut, &QShortcut::activated, this, &QAbstractButton::click);
    }
}

QSize KeyButton::sizeHint() const {
    const QFontMetrics metrics(font());
    int width = 2 * kPadding + metrics.horizontalAdvance(text());
    if (icon_)
        width += kIconSize + kGap;
    if (!key_.isEmpty())
        width += kGap + 2 * kCapPadding + QFontMetrics(fontOf(TextRole::Note)).horizontalAdvance(keyText());
    return {width + 2 * kFocusRoom, std::max(space::kControl, metrics.height() + 12) + 2 * kFocusRoom};
}

void KeyButton::keyPressEvent(QKeyEvent* event) {
    if (event->key() == Qt::Key_Return || event->key() == Qt::Key_Enter) {
        click();
        return;
    }
    QAbstractButton::keyPressEvent(event);
}

void KeyButton::focusInEvent(QFocusEvent* event) {
    showsFocus_ = event->reason() != Qt::MouseFocusReason && event->reason() != Qt::ActiveWindowFocusReason;
    QAbstractButton::focusInEvent(event);
}

void KeyButton::focusOutEvent(QFocusEvent* event) {
    showsFocus_ = false;
    QAbstractButton::focusOutEvent(event);
}

void KeyButton::paintEvent(QPaintEvent*) {
    const Colours& c = coloursOf(palette());
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    const QRectF body = QRectF(rect()).adjusted(kFocusRoom, kFocusRoom, -kFocusRoom, -kFocusRoom);

    QColor fill = weight_ == Weight::Main ? c.accent : c.raised;
    QColor edge = weight_ == Weight::Main ? c.accent : weight_ == Weight::Grave ? c.bad : c.edge;
    QColor ink = weight_ == Weight::Main ? c.onAccent : weight_ == Weight::Grave ? c.bad : c.ink;
    if (!isEnabled()) {
        fill = Qt::transparent;
        edge = c.line;
        ink = c.ink3;
    } else if (weight_ != Weight::Main && (underMouse() || isDown())) {
        fill = c.soft;
        edge = weight_ == Weight::Grave ? c.bad : c.accent;
    }
    painter.setPen(QPen(edge, 1));
    painter.setBrush(fill);
    painter.drawRoundedRect(body.adjusted(0.5, 0.5, -0.5, -0.5), space::kRadius, space::kRadius);
    if (showsFocus_) {
        painter.setPen(QPen(c.accent, 2));
        painter.setBrush(Qt::NoBrush);
        painter.drawRoundedRect(QRectF(rect()).adjusted(1, 1, -1, -1), space::kRadius + 2,
                                space::kRadius + 2);
    }

    double x = body.left() + kPadding;
    if (icon_) {
        drawIcon(painter, QRectF(x, body.center().y() - kIconSize / 2.0, kIconSize, kIconSize), *icon_, ink);
        x += kIconSize + kGap;
    }
    painter.setPen(ink);
    painter.setFont(font());
    const double textWidth = QFontMetrics(font()).horizontalAdvance(text());
    painter.drawText(QRectF(x, body.top(), textWidth + 1, body.height()), Qt::AlignVCenter, text());
    x += textWidth + kGap;
    if (!key_.isEmpty()) {
        const QFont capFont = fontOf(TextRole::Note);
        const QFontMetrics metrics(capFont);
        const double capHeight = metrics.height() + 2;
        const QRectF cap(x, body.center().y() - capHeight / 2,
                         metrics.horizontalAdvance(keyText()) + 2 * kCapPadding, capHeight);
        painter.setBrush(Qt::NoBrush);
        painter.setPen(QPen(weight_ == Weight::Usual && isEnabled() ? c.edge : ink, 1));
        painter.drawRoundedRect(cap, space::kRadius, space::kRadius);
        painter.setPen(ink);
        painter.setFont(capFont);
        painter.drawText(cap, Qt::AlignCenter, keyText());
    }
}

} // namespace whichway
