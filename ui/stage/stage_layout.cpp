// SPDX-License-Identifier: GPL-3.0-or-later
// Where the stage's parts stand. Low windows get smaller gaps, then smaller panes, never smaller text.
#include "ui/look/tokens.h"
#include "ui/motion/pair_view.h"
#include "ui/stage/confidence_row.h"
#include "ui/stage/stage_bar.h"
#include "ui/stage/stage_button.h"
#include "ui/stage/stage_panel.h"
#include "ui/stage/stage_window.h"

#include <QLabel>
#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

constexpr int kRing = 8;     ///< what stage buttons keep free around their outline
constexpr int kFrame = 8;    ///< what the pair view keeps free around its panes
constexpr int kPaneGap = 48; ///< between the two panes

void place(QWidget* widget, int x, int y, int width, int height) {
    widget->setGeometry(x - kRing, y - kRing, width + 2 * kRing, height + 2 * kRing);
}

int outlineWidth(const QWidget* button) {
    return button->sizeHint().width() - 2 * kRing;
}

} // namespace

void StageWindow::arrange() {
    arrangePair();
    arrangePage();
    if (stopPanel_->isVisible())
        stopPanel_->arrange();
    if (troublePanel_->isVisible())
        troublePanel_->arrange();
}

void StageWindow::arrangePair() {
    const double roomy = std::clamp((height() - 720) / 360.0, 0.0, 1.0);
    const auto between = [&](double low, double high) {
        return static_cast<int>(std::lround(low + (high - low) * roomy));
    };
    const double scale = stageScale();
    const auto scaled = [&](int pixels) { return static_cast<int>(std::lround(pixels * scale)); };
    const int margin = width() < 1600 ? 24 : 48;
    const int usable = width() - 2 * margin;

    const int bottomHeight = scaled(between(48, 52));
    const int bottomY = height() - between(16, 24) - bottomHeight;
    const int confidenceHeight = confidence_->sizeHint().height() - 2 * kRing;
    const int choiceHeight = scaled(between(56, 68)), replayHeight = scaled(between(46, 52));
    const int underPanes = between(10, 20) + 8 + between(10, 18) + replayHeight + between(10, 20) +
                           choiceHeight + between(12, 20) + confidenceHeight;
    const int questionY = between(14, 30);
    const int questionHeight = std::max(question_->heightForWidth(usable), scaled(44));
    const int panesY = questionY + questionHeight + between(8, 22);

    const int free = std::max(120, bottomY - between(14, 44) - underPanes - panesY);
    const double aspect = (pair_->heightFor(100000) - 2 * kFrame) / (50000.0 - kFrame);
    const int widest = (usable - kPaneGap) / 2;
    const int paneWidth = std::clamp(static_cast<int>(free / aspect), std::min(widest, 360), widest);
    const int paneHeight = std::min(free, static_cast<int>(paneWidth * aspect));
    const int slack = (free - paneHeight) / 2;
    const int block = 2 * paneWidth + kPaneGap;
    const int x = (width() - block) / 2;

    question_->setGeometry(margin, questionY + slack / 2, usable, questionHeight);
    int y = panesY + slack;
    pair_->setFrameRoom(kFrame);
    pair_->setGap(kPaneGap - 2 * kFrame);
    pair_->setGeometry(x - kFrame, y - kFrame, block + 2 * kFrame, paneHeight + 2 * kFrame);
    y += paneHeight + between(10, 20);
    bar_->setGeometry(x, y, block, 8);
    y += 8 + between(10, 18);
    const int playWidth = std::max(outlineWidth(pause_), outlineWidth(replay_));
    place(pause_, width() / 2 - 12 - playWidth, y, playWidth, replayHeight);
    place(replay_, width() / 2 + 12, y, playWidth, replayHeight);
    y += replayHeight + between(10, 20);
    const int middle = cannotTell_ ? outlineWidth(cannotTell_) + 32 : 0;
    const int choiceWidth = cannotTell_ ? (block - middle - 32) / 2 : paneWidth;
    place(left_, x, y, choiceWidth, choiceHeight);
    place(right_, x + block - choiceWidth, y, choiceWidth, choiceHeight);
    if (cannotTell_)
        place(cannotTell_, x + choiceWidth + 16, y, block - 2 * choiceWidth - 32, choiceHeight);
    y += choiceHeight + between(12, 20);

    const int nextWidth = outlineWidth(next_);
    const int sides =
        std::max({nextWidth, sureness_->fontMetrics().horizontalAdvance(sureness_->text()) + 8}) + 40;
    const int rowWidth = std::min(confidence_->sizeHint().width(), usable - 2 * sides);
    const int rowX = (width() - rowWidth) / 2;
    confidence_->setGeometry(rowX, y - kRing, rowWidth, confidenceHeight + 2 * kRing);
    sureness_->setGeometry(margin, y, rowX - margin - 24, confidenceHeight);
    place(next_, rowX + rowWidth + 24, y + (confidenceHeight - scaled(56)) / 2, nextWidth, scaled(56));
    hint_->setGeometry(margin, y, usable, confidenceHeight);

    const int sideWidth = std::max({scaled(200), outlineWidth(undo_), outlineWidth(stop_)});
    place(undo_, margin, bottomY, sideWidth, bottomHeight);
    place(stop_, width() - margin - sideWidth, bottomY, sideWidth, bottomHeight);
    const int sideRoom = margin + sideWidth + 24;
    progress_->setGeometry(sideRoom, bottomY - 8, width() - 2 * sideRoom, bottomHeight + 16);
}

void StageWindow::arrangePage() {
    const int textWidth = std::min(width() - 96, static_cast<int>(std::lround(900 * stageScale())));
    const QSize button = pageButton_->sizeHint();
    const int textHeight =
        std::min(std::max(page_->heightForWidth(textWidth), 40), height() - button.height() - 220);
    const int total = textHeight + 40 + button.height();
    const int y = std::max(32, (height() - total) / 2 - 20);
    page_->setGeometry((width() - textWidth) / 2, y, textWidth, textHeight);
    pageButton_->setGeometry((width() - button.width()) / 2, y + textHeight + 40, button.width(),
                             button.height());
}

} // namespace whichway
