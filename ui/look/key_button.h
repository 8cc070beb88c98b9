// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/look/icons.h"

#include <QAbstractButton>
#include <QKeySequence>
#include <optional>

namespace whichway {

/// A button of bench and pages: an icon, a word that says what happens, and the key that does the same.
class KeyButton final : public QAbstractButton {
    Q_OBJECT
public:
    enum class Weight { Usual, Main, Grave };

    /// @param name object name, e.g. "bench.pause"
    KeyButton(const QString& name, const QString& text, Weight weight = Weight::Usual,
              std::optional<Icon> icon = std::nullopt, const QKeySequence& key = {},
              QWidget* parent = nullptr);

    QSize sizeHint() const override;
    QSize minimumSizeHint() const override { return sizeHint(); }

protected:
    void paintEvent(QPaintEvent* event) override;
    void keyPressEvent(QKeyEvent* event) override;
    void focusInEvent(QFocusEvent* event) override;
    void focusOutEvent(QFocusEvent* event) override;

private:
    QString keyText() const {
        return key_.toString(QKeySequence::NativeText).replace(QLatin1Char('+'), QLatin1Char(' '));
    }

    Weight weight_;
    std::optional<Icon> icon_;
    QKeySequence key_;
    bool showsFocus_ = false; ///< the ring is for those who came by the keyboard
};

} // namespace whichway
