// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/study.h"
#include "ui/pages/session_list.h"

#include <QStackedWidget>

class QLabel;
class QLineEdit;
class QRadioButton;
class QTableView;
class QVBoxLayout;

namespace whichway {

class KeyButton;
class QuietPage;
class StudyProblems;

/// The first stop: what the study is, whether its library can answer the question, and the way into a
/// session.
class StudyPage final : public QStackedWidget {
    Q_OBJECT
public:
    explicit StudyPage(QWidget* parent = nullptr);

    void showNothing();
    void showProblems(const QString& folder, const std::vector<Error>& problems);
    /// `study` must outlive its showing.
    void showStudy(const Study& study);
    /// @param running id of the session that runs in this program, or empty
    void showSessions(const std::vector<SessionRow>& sessions, const std::string& running);
    /// Says beside the form why a session did not start; an empty text takes it away.
    void showStartProblem(const QString& text);

Q_SIGNALS:
    void openAsked();
    void readAgainAsked();
    void startAsked(const QString& code, bool pilot);
    void goOnAsked(const whichway::SessionFolder& folder);

private:
    QWidget* makeStudyView(const Study& study);
    QWidget* makeLibrary(const Study& study);
    QWidget* makeSide(const Study& study);
    void addStartForm(QVBoxLayout& side);
    void addFeatures(QVBoxLayout& side, const Study& study);
    void addFindings(QVBoxLayout& side, const Study& study);
    void updateStart();

    QuietPage* nothing_;
    StudyProblems* problems_;
    QWidget* view_ = nullptr;
    QLineEdit* code_ = nullptr;
    QRadioButton* pilot_ = nullptr;
    KeyButton* start_ = nullptr;
    QLabel* startProblem_ = nullptr;
    QVBoxLayout* sessions_ = nullptr;
    bool isRunning_ = false;
};

} // namespace whichway
