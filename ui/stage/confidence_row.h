// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/stage/stage_button.h"

#include <QWidget>
#include <vector>

namespace whichway {

/// The words for how sure, from least to most. The row takes the focus, never one of its words: a word that
/// is lit before anything was pressed would be an answer suggested.
class ConfidenceRow final : public QWidget {
    Q_OBJECT
public:
    ConfidenceRow(const std::vector<std::string>& words, QWidget* parent);

    void setChosenLevel(int level); ///< 0: none
    void setWordsEnabled(bool enabled);
    /// Many words: they stand below their keys and need the whole width.
    bool isWide() const;
    QSize sizeHint() const override;

Q_SIGNALS:
    void pressed(int level); ///< 1 … K

protected:
    void paintEvent(QPaintEvent* event) override;
    void resizeEvent(QResizeEvent* event) override;

private:
    std::vector<StageButton*> words_;
};

} // namespace whichway
