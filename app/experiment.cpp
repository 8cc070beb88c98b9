// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/experiment.h"

#include "core/session/planning_request.h"
#include "ui/bench/bench_page.h"
#include "ui/pages/session_list.h"

#include <QFileDialog>
#include <QGuiApplication>
#include <QRandomGenerator>
#include <QScreen>

namespace whichway {

Experiment::Experiment(FileSystem& files, const Clock& clock, ReportWriter writeReport)
    : files_(files), clock_(clock) {
    window_.reviewPage().setReportWriter(std::move(writeReport));
    connect(&window_, &MainWindow::openAsked, this, &Experiment::chooseFolder);
    StudyPage& page = window_.studyPage();
    connect(&page, &StudyPage::openAsked, this, &Experiment::chooseFolder);
    connect(&page, &StudyPage::readAgainAsked, this, [this] { open(folder_); });
    connect(&page, &StudyPage::startAsked, this, [this](const QString& code, bool pilot) {
        begin({.kind = pilot ? SessionKind::Pilot : SessionKind::Participant,
               .code = code.toStdString(),
               .language = {},
               .seed = QRandomGenerator::system()->generate64()});
    });
    connect(&page, &StudyPage::goOnAsked, this, &Experiment::goOn);
}

Experiment::~Experiment() {
    closeSession();
}

bool Experiment::open(const QString& folder) {
    if (controller_)
        return false; // the running session holds the study
    folder_ = folder;
    StudyReading reading = readStudy(files_, folder.toStdString());
    opened_ = reading.ok();
    if (!opened_) {
        window_.showProblems(folder, reading.problems);
        return false;
    }
    study_ = std::move(reading.study);
    painter_ = std::make_shared<const MotionPainter>(study_);
    window_.showStudy(study_);
    showSessions();
    return true;
}

void Experiment::chooseFolder() {
    const QString folder = QFileDialog::getExistingDirectory(&window_, tr("Open a study folder"), folder_);
    if (!folder.isEmpty())
        open(folder);
}

std::unique_ptr<Planner> Experiment::makePlanner() const {
    return std::make_unique<PlanningWorker>(planningProblemOf(study_.protocol));
}

void Experiment::begin(const SessionSetup& setup) {
    if (!opened_ || controller_)
        return;
    take(SessionController::begin({.study = study_,
                                   .files = files_,
                                   .clock = clock_,
                                   .planner = makePlanner(),
                                   .program = WHICHWAY_VERSION},
                                  setup));
}

void Experiment::goOn(const SessionFolder& folder) {
    if (!opened_ || controller_)
        return;
    take(SessionController::resume({.study = study_,
                                    .files = files_,
                                    .clock = clock_,
                                    .planner = makePlanner(),
                                    .program = WHICHWAY_VERSION},
                                   folder));
}

void Experiment::take(Result<std::unique_ptr<SessionController>> controller) {
    if (!controller) {
        window_.studyPage().showStartProblem(QString::fromStdString(describe(controller.error())));
        return;
    }
    window_.studyPage().showStartProblem({});
    controller_ = std::move(*controller);
    auto* bench = new BenchPage(*controller_, painter_);
    connect(bench, &BenchPage::closeAsked, this, &Experiment::closeSession, Qt::QueuedConnection);
    window_.setBenchPage(bench);
    stage_ = std::make_unique<StageWindow>(*controller_, painter_);
    const QList<QScreen*> screens = QGuiApplication::screens();
    if (screens.size() > 1) {
        QScreen* other = screens[0] == window_.screen() ? screens[1] : screens[0];
        stage_->setGeometry(other->geometry());
        stage_->showFullScreen();
    } else {
        stage_->showMaximized();
    }
    connect(controller_.get(), &SessionController::ended, this, &Experiment::showSessions);
    showSessions();
}

void Experiment::closeSession() {
    if (!controller_)
        return;
    stage_.reset();
    window_.setBenchPage(nullptr);
    controller_.reset();
    showSessions();
    window_.goTo(Stop::Study);
}

void Experiment::showSessions() {
    const auto sessions = listSessions(files_, study_.folder);
    if (sessions)
        window_.showSessions(*sessions,
                             controller_ && !controller_->state().ended ? controller_->folder().id : "");
}

} // namespace whichway
