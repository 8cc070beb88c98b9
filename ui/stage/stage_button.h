// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/look/icons.h"

#include <QAbstractButton>
#include <optional>

namespace whichway {

/// A grey button of the stage: a word and the key that does the same. Enter presses it while it has the
/// focus; every other key goes on to the window, so that the keys mean the same wherever the focus is.
class StageButton final : public QAbstractButton {
    Q_OBJECT
public:
    enum class Order {
        KeyFirst,  ///< key, word, tick
        KeyLast,   ///< tick, word, key: the mirror image
        WordFirst, ///< icon, word, key
        KeyAbove   ///< key above a word that may take several lines
    };

    /// @param name object name, e.g. "stage.chooseLeft"
    /// @param pixels size of the word at 96 dpi, see stageFont
    StageButton(const QString& name, const QString& text, const QString& key, double pixels, Order order,
                QWidget* parent);

    void setIconKind(Icon icon) { icon_ = icon; }
    void setKey(const QString& key);
    /// Chosen: white on black, with a tick.
    void setChosen(bool chosen);
    bool isChosen() const { return chosen_; }

    QSize sizeHint() const override;

protected:
    void paintEvent(QPaintEvent* event) override;
    void keyPressEvent(QKeyEvent* event) override;

private:
    double capWidth() const;
    double contentWidth() const;
    void drawCap(QPainter& painter, const QRectF& cap, const QColor& ink) const;
    void drawTick(QPainter& painter, const QPointF& centre, const QColor& ink) const;

    QString key_;
    double pixels_;
    Order order_;
    std::optional<Icon> icon_;
    bool chosen_ = false;
};

} // namespace whichway
