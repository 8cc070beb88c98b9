// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/commands/windows.h"

#include "app/commands/report.h"
#include "app/experiment.h"
#include "app/terminal.h"
#include "ui/look/style.h"

#include <QApplication>
#include <functional>

namespace whichway {
namespace {

int runWindow(int argc, char** argv, const std::function<bool(Experiment&)>& start) {
    QApplication application(argc, argv);
    QCoreApplication::setApplicationName(QStringLiteral("Whichway"));
    QCoreApplication::setApplicationVersion(QStringLiteral(WHICHWAY_VERSION));
    applyLook(application, systemTheme());
    RealFileSystem files;
    const RealClock clock;
    Experiment experiment(files, clock,
                          [&files](const SessionFolder& folder) { return writeReportBeside(files, folder); });
    experiment.window().show();
    if (!start(experiment))
        return kInputAtFault;
    return QApplication::exec();
}

} // namespace

int openWindow(const std::string& study, int argc, char** argv) {
    return runWindow(argc, argv, [&](Experiment& experiment) {
        if (!study.empty())
            experiment.open(QString::fromStdString(study)); // what is wrong with it stands on the page
        return true;
    });
}

int conductOnScreen(const Study& study, const SessionSetup& setup,
                    const std::optional<SessionFolder>& resumed, int argc, char** argv) {
    return runWindow(argc, argv, [&](Experiment& experiment) {
        if (!experiment.open(QString::fromStdString(study.folder)))
            return false;
        if (resumed)
            experiment.goOn(*resumed);
        else
            experiment.begin(setup);
        return true;
    });
}

} // namespace whichway
