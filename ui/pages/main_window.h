// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/pages/review_page.h"
#include "ui/pages/route.h"
#include "ui/pages/study_page.h"

#include <QMainWindow>

class QLabel;
class QStackedWidget;

namespace whichway {

class QuietPage;
class TitleBlock;

/// The experimenter's window: the route on top, one page, and the title block at the foot. It shows what it
/// is given and says by its pages' signals what is asked for; whoever holds study and session does it.
class MainWindow final : public QMainWindow {
    Q_OBJECT
public:
    explicit MainWindow(QWidget* parent = nullptr);

    StudyPage& studyPage() { return *study_; }
    ReviewPage& reviewPage() { return *review_; }

    /// `study` must outlive its showing.
    void showStudy(const Study& study);
    void showProblems(const QString& folder, const std::vector<Error>& problems);
    /// @param running id of the session that runs in this program, or empty
    void showSessions(const std::vector<SessionRow>& sessions, const std::string& running);

    /// Takes the page over, puts it at the bench stop and goes there; nullptr takes the last one away and
    /// deletes it at once (so not from within one of its own signals).
    void setBenchPage(QWidget* page);
    void goTo(Stop stop);
    Stop current() const { return current_; }

Q_SIGNALS:
    void openAsked();
    void closeAskedWhileRunning(); ///< the window was to be closed while a session runs; it stays open

protected:
    void closeEvent(QCloseEvent* event) override;

private:
    QWidget* makeFrame();
    void showTitle(const QString& title);

    Route* route_;
    QLabel* title_;
    QStackedWidget* pages_;
    TitleBlock* foot_;
    StudyPage* study_;
    QuietPage* rehearsal_;
    QStackedWidget* bench_;
    QuietPage* noBench_;
    ReviewPage* review_;
    QuietPage* cohort_;
    QWidget* benchPage_ = nullptr;
    Stop current_ = Stop::Study;
    Stop previous_ = Stop::Study;
    bool isRunning_ = false;
};

} // namespace whichway
