// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/motion/motion_painter.h"
#include "ui/session/session_controller.h"

#include <QTimer>
#include <QWidget>
#include <memory>

class QLabel;

namespace whichway {

class ConfidenceRow;
class PairView;
class StageBar;
class StageButton;
class StagePanel;

/// The participant's window. It shows what the session's prompt says and forwards what the participant
/// presses; an answer counts as saved on the screen only when it is on disk. Grey only, and mirrored about
/// its middle. Keys: Space or R replays, P pauses, Left and Right choose, 0 cannot tell (where allowed), 1 …
/// K how sure, Enter the next pair, Backspace takes back, Escape asks whether to stop. `controller` must
/// outlive it.
class StageWindow final : public QWidget {
    Q_OBJECT
public:
    StageWindow(SessionController& controller, std::shared_ptr<const MotionPainter> painter,
                QWidget* parent = nullptr);

    /// One look at the clock and one frame. Called by a timer while a pair plays; tests with a clock of their
    /// own call it too.
    void tick();

protected:
    void paintEvent(QPaintEvent* event) override;
    void resizeEvent(QResizeEvent* event) override;
    void keyPressEvent(QKeyEvent* event) override;
    void closeEvent(QCloseEvent* event) override;

private:
    enum class View { Page, Pair };

    void build();
    void connectAll();
    void refresh();
    void refreshPage(const Prompt& prompt);
    void refreshPair(const Prompt& prompt);
    void refreshTrouble();
    void showView(View view);
    void arrange();
    void arrangePair();
    void arrangePage();
    QString progressText(const Prompt& prompt) const;

    void choose(Side side);
    void pressConfidence(int level);
    void pressUndo();
    void pressReplay();
    void pressPageButton();
    void askToStop();
    void closeStopQuestion();
    bool panelKey(int key);
    void pairKey(int key);
    bool canAnswer() const;

    SessionController& controller_;
    Side chosen_ = Side::None; ///< pressed, with no confidence yet
    QTimer frames_;
    View view_ = View::Page;

    QLabel* question_;
    PairView* pair_;
    StageBar* bar_;
    StageButton* pause_;
    StageButton* replay_;
    StageButton* left_;
    StageButton* right_;
    StageButton* cannotTell_ = nullptr; ///< only where the study allows it
    QLabel* hint_;
    QLabel* sureness_;
    ConfidenceRow* confidence_;
    StageButton* next_;
    StageButton* undo_;
    QLabel* progress_;
    StageButton* stop_;
    QLabel* page_;
    StageButton* pageButton_;
    StagePanel* stopPanel_;
    StagePanel* troublePanel_;
};

} // namespace whichway
