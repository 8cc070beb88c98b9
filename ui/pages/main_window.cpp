// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/main_window.h"

#include "ui/look/icons.h"
#include "ui/look/key_button.h"
#include "ui/look/numbers.h"
#include "ui/look/style.h"
#include "ui/pages/page_parts.h"
#include "ui/pages/quiet_page.h"
#include "ui/pages/title_block.h"

#include <QCloseEvent>
#include <QDir>
#include <QHBoxLayout>
#include <QLabel>
#include <QShortcut>
#include <QStackedWidget>
#include <QVBoxLayout>
#include <algorithm>

namespace whichway {
namespace {

QString homeShortened(const std::string& folder) {
    const QString path = QDir::cleanPath(QString::fromStdString(folder));
    const QString home = QDir::homePath();
    return path.startsWith(home + QLatin1Char('/')) ? QLatin1Char('~') + path.mid(home.size()) : path;
}

} // namespace

MainWindow::MainWindow(QWidget* parent) : QMainWindow(parent) {
    setObjectName(QStringLiteral("main"));
    setWindowTitle(tr("Whichway"));
    setMinimumSize(1180, 700);
    resize(1440, 900);
    study_ = new StudyPage;
    rehearsal_ = new QuietPage(QStringLiteral("rehearsal"), tr("Rehearsal"));
    rehearsal_->setContent(
        tr("Rehearse with a simulated participant"),
        tr("The very session code answers itself with known weights, as a pilot kept apart from the "
           "data:\nwhichway conduct STUDY --participant CODE --answers simulated\nIts report, on "
           "the Review page, shows how well the weights were found again."));
    rehearsal_->addAction(QStringLiteral("rehearsal.toReview"), tr("Go to the review"), true,
                          [this] { goTo(Stop::Review); });
    noBench_ = new QuietPage(QStringLiteral("bench.none"), tr("Bench"));
    noBench_->setContent(tr("No session is running"),
                         tr("Start one on the Study page, or go on with one that has not ended."));
    noBench_->addAction(QStringLiteral("bench.toStudy"), tr("Go to the study"), true,
                        [this] { goTo(Stop::Study); });
    bench_ = new QStackedWidget;
    bench_->addWidget(noBench_);
    review_ = new ReviewPage;
    cohort_ = new QuietPage(QStringLiteral("cohort"), tr("Cohort"));
    cohort_->addAction(QStringLiteral("cohort.toStudy"), tr("Go to the study"), true,
                       [this] { goTo(Stop::Study); });
    cohort_->addAction(QStringLiteral("cohort.toReview"), tr("Go to the review"), false,
                       [this] { goTo(Stop::Review); });

    setCentralWidget(makeFrame());
    connect(route_, &Route::stopChosen, this, &MainWindow::goTo);
    connect(study_, &StudyPage::openAsked, this, &MainWindow::openAsked);
    connect(review_, &ReviewPage::studyAsked, this, [this] { goTo(Stop::Study); });
    auto* back = new QShortcut(QKeySequence(Qt::ALT | Qt::Key_Left), this);
    connect(back, &QShortcut::activated, this, [this] { goTo(previous_); });
    auto* open = new QShortcut(QKeySequence::Open, this);
    connect(open, &QShortcut::activated, this, &MainWindow::openAsked);
    study_->showNothing();
    showSessions({}, {});
    showTitle({});
    goTo(Stop::Study);
}

QWidget* MainWindow::makeFrame() {
    auto* frame = new QWidget;
    auto* column = new QVBoxLayout(frame);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(0);
    auto* top = new QHBoxLayout;
    top->setContentsMargins(space::k24, 0, space::k24, 0);
    top->setSpacing(space::k12);
    auto* mark = new QLabel;
    mark->setPixmap(iconOf(Icon::Way, coloursOf(palette()).accent).pixmap(26, 26));
    title_ = makeLabel({}, TextRole::Heading);
    title_->setObjectName(QStringLiteral("main.title"));
    title_->setWordWrap(false);
    title_->setSizePolicy(QSizePolicy::Ignored, QSizePolicy::Preferred);
    route_ = new Route;
    top->addWidget(mark);
    top->addWidget(title_, 1);
    top->addWidget(route_);
    top->addStretch(1);
    column->addLayout(top);
    column->addWidget(makePageRule());
    pages_ = new QStackedWidget;
    for (QWidget* page : std::initializer_list<QWidget*>{study_, rehearsal_, bench_, review_, cohort_}) {
        page->setFocusPolicy(Qt::ClickFocus);
        pages_->addWidget(page);
    }
    column->addWidget(pages_, 1);
    foot_ = new TitleBlock;
    column->addWidget(foot_);
    return frame;
}

void MainWindow::showTitle(const QString& title) {
    title_->setText(title.isEmpty() ? tr("Whichway") : title);
    setWindowTitle(title.isEmpty() ? tr("Whichway") : title + tr(", Whichway"));
}

void MainWindow::showStudy(const Study& study) {
    study_->showStudy(study);
    const Protocol& p = study.protocol;
    showTitle(QString::fromStdString(p.title));
    foot_->setEntries(
        {{tr("Folder"), homeShortened(study.folder)},
         {tr("Protocol"),
          QString::fromStdString(p.version) + tr(", hash ") + QString::fromStdString(p.hash.substr(0, 12))},
         {tr("Library"), countText(static_cast<int>(p.table.motions.size()), tr("motion"), tr("motions"))},
         {tr("Planning"), QString::fromStdString(p.planning.choose) + tr(", batches of ") +
                              QString::number(p.planning.batch)},
         {QString(), tr("Preferences are not a safety case.")}});
}

void MainWindow::showProblems(const QString& folder, const std::vector<Error>& problems) {
    study_->showProblems(folder, problems);
    showTitle({});
    foot_->setEntries({{tr("Folder"), folder}});
    goTo(Stop::Study);
}

void MainWindow::showSessions(const std::vector<SessionRow>& sessions, const std::string& running) {
    isRunning_ = !running.empty();
    route_->setRunning(isRunning_);
    study_->showSessions(sessions, running);
    // What the running person answered stays covered until the session ends.
    std::vector<SessionRow> over;
    std::copy_if(sessions.begin(), sessions.end(), std::back_inserter(over),
                 [&](const SessionRow& row) { return row.folder.id != running; });
    review_->showSessions(over);
    const auto finished = std::count_if(over.begin(), over.end(), [](const SessionRow& row) {
        return row.kind == SessionKind::Participant && row.state == SessionRow::State::Finished;
    });
    cohort_->setContent(
        finished < 2 ? tr("Two finished sessions are needed to set people side by side")
                     : tr("%1 finished sessions of participants").arg(finished),
        finished == 0 ? tr("There is none yet. Pilots and simulated participants do not count.")
        : finished == 1
            ? tr("There is one. Pilots and simulated participants do not count.")
            : tr("Write each person's report on the Review page; their weights.json files hold the "
                 "numbers to set side by side. Fewer than 15 people: informal."));
}

void MainWindow::setBenchPage(QWidget* page) {
    if (benchPage_) {
        bench_->removeWidget(benchPage_);
        delete benchPage_; // at once, for the session that it shows may be about to go
    }
    benchPage_ = page;
    if (page)
        bench_->addWidget(page);
    bench_->setCurrentWidget(page ? page : noBench_);
    if (page)
        goTo(Stop::Bench);
    else
        foot_->show();
}

void MainWindow::goTo(Stop stop) {
    if (stop != current_)
        previous_ = current_;
    current_ = stop;
    route_->setCurrent(stop);
    pages_->setCurrentIndex(static_cast<int>(stop));
    // The bench has its action bar at the foot.
    pages_->currentWidget()->setFocus(Qt::OtherFocusReason);
    foot_->setVisible(stop != Stop::Bench || !benchPage_);
}

void MainWindow::closeEvent(QCloseEvent* event) {
    if (!isRunning_) {
        event->accept();
        return;
    }
    event->ignore();
    goTo(Stop::Bench);
    Q_EMIT closeAskedWhileRunning();
}

} // namespace whichway
