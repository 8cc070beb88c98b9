// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/motion/motion_painter.h"
#include "ui/session/session_controller.h"

#include <QTimer>
#include <QWidget>
#include <memory>

class QLabel;
class QLineEdit;
class QVBoxLayout;

namespace whichway {

class FactTable;
class KeyButton;
class NoticeStrip;
class PairView;
class SessionLine;

/// The experimenter's console while a session runs: where it is, what the stage shows, how the planner does,
/// notes. Blind: neither what was chosen nor anything that would tell it is shown. Keys: Ctrl+P pauses and
/// goes on, Ctrl+N writes a note, Ctrl+. asks whether to stop. `controller` must outlive it.
class BenchPage final : public QWidget {
    Q_OBJECT
public:
    BenchPage(SessionController& controller, std::shared_ptr<const MotionPainter> painter,
              QWidget* parent = nullptr);

Q_SIGNALS:
    void closeAsked(); ///< the session has ended and the experimenter is done with it

private:
    QWidget* makeHead();
    QWidget* makeStageColumn(std::shared_ptr<const MotionPainter> painter);
    QWidget* makePlannerColumn();
    QWidget* makeNotesColumn();
    QWidget* makeActionBar();
    void refresh();
    void refreshHead();
    void refreshStage();
    void refreshPlanner();
    void refreshNotes();
    void refreshStrips();
    void tick();
    void togglePause();
    void takeNote();

    SessionController& controller_;
    QTimer frames_;
    std::size_t notesShown_ = 0;

    QLabel* code_ = nullptr;
    QLabel* where_ = nullptr;
    QLabel* running_ = nullptr;
    QLabel* journal_ = nullptr;
    NoticeStrip* paused_ = nullptr;
    NoticeStrip* trouble_ = nullptr;
    NoticeStrip* stopping_ = nullptr;
    SessionLine* line_ = nullptr;
    PairView* pair_ = nullptr;
    QLabel* left_ = nullptr;
    QLabel* right_ = nullptr;
    QLabel* played_ = nullptr;
    QLabel* answer_ = nullptr;
    QLabel* plan_ = nullptr;
    QLabel* queue_ = nullptr;
    QLabel* known_ = nullptr;
    QLabel* thread_ = nullptr;
    QLabel* wait_ = nullptr;
    QLabel* planTrouble_ = nullptr;
    QVBoxLayout* notes_ = nullptr;
    QLineEdit* noteText_ = nullptr;
    KeyButton* pause_ = nullptr;
    KeyButton* note_ = nullptr;
    KeyButton* stop_ = nullptr;
    KeyButton* close_ = nullptr;
};

} // namespace whichway
