// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/clock.h"
#include "core/files/file_system.h"
#include "core/study/study.h"
#include "ui/motion/motion_painter.h"
#include "ui/pages/main_window.h"
#include "ui/session/session_controller.h"
#include "ui/stage/stage_window.h"

#include <QObject>
#include <functional>
#include <memory>

namespace whichway {

/// Wires the experimenter's window, the session that runs, its stage and its bench to one another. Decides
/// nothing that core or a page could decide.
class Experiment final : public QObject {
    Q_OBJECT
public:
    /// Writes a session's report. @return the folder that it is in.
    using ReportWriter = std::function<Result<std::string>(const SessionFolder&)>;

    /// `files` and `clock` must outlive it.
    Experiment(FileSystem& files, const Clock& clock, ReportWriter writeReport);
    ~Experiment() override;

    MainWindow& window() { return window_; }
    /// Reads and shows a study folder. @return whether it opened.
    bool open(const QString& folder);
    void begin(const SessionSetup& setup);
    void goOn(const SessionFolder& folder);

private:
    void take(Result<std::unique_ptr<SessionController>> controller);
    void closeSession();
    void showSessions();
    std::unique_ptr<Planner> makePlanner() const;
    void chooseFolder();

    FileSystem& files_;
    const Clock& clock_;
    QString folder_;
    Study study_;
    bool opened_ = false;
    std::shared_ptr<const MotionPainter> painter_;
    MainWindow window_;
    std::unique_ptr<SessionController> controller_;
    std::unique_ptr<StageWindow> stage_;
};

} // namespace whichway
