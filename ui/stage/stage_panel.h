// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QWidget>
#include <functional>
#include <vector>

class QLabel;

namespace whichway {

class StageButton;

/// A calm panel in the middle of the stage: a sentence or two, and what can be done.
class StagePanel final : public QWidget {
    Q_OBJECT
public:
    StagePanel(const QString& name, QWidget* parent);

    void setText(const QString& heading, const QString& text);
    /// The first action added is the one that takes the focus.
    StageButton* addAction(const QString& name, const QString& text, const QString& key,
                           const std::function<void()>& action);
    /// Shows the panel in the middle of its parent.
    void open();
    void arrange();

protected:
    void paintEvent(QPaintEvent* event) override;

private:
    QLabel* heading_;
    QLabel* text_;
    std::vector<StageButton*> actions_;
};

} // namespace whichway
