// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/commands/report.h"

#include "app/terminal.h"
#include "core/findings/session_findings.h"
#include "core/journal/journal.h"
#include "core/journal/session_state.h"
#include "core/study/study.h"
#include "ui/report/session_report.h"

#include <QApplication>
#include <cstdlib>
#include <filesystem>

namespace whichway {
namespace {

/// STUDY of STUDY/sessions/ID.
std::string studyOf(const SessionFolder& session) {
    // "." at the end stands for the folder itself, however the path was written.
    const auto inside = std::filesystem::absolute(session.path) / ".";
    return inside.lexically_normal().parent_path().parent_path().parent_path().string();
}

bool hasDisplay() {
    const auto isSet = [](const char* name) {
        const char* value = std::getenv(name);
        return value && *value != '\0';
    };
    return isSet("DISPLAY") || isSet("WAYLAND_DISPLAY");
}

Result<void> writeReport(FileSystem& files, const SessionFolder& session, const std::string& folder) {
    const auto reading = readJournal(files, session.journal());
    if (!reading)
        return reading.error();
    const auto state = replayRecords(reading->records);
    if (!state)
        return state.error();
    const auto findings = findSession(*state);
    if (!findings)
        return findings.error();
    // The session holds all that is reported; the study beside it adds drawings of the motions.
    const StudyReading study = readStudy(files, studyOf(session));
    const bool isTheSame = study.ok() && study.study.protocol.hash == state->began.protocol.hash;
    return writeSessionReport(files, *state, *findings,
                              {.code = session.code, .study = isTheSame ? &study.study : nullptr}, folder);
}

} // namespace

Result<std::string> writeReportBeside(FileSystem& files, const SessionFolder& session) {
    const std::string folder = session.path + "/report";
    if (auto written = writeReport(files, session, folder); !written)
        return written.error();
    return folder;
}

int report(const std::string& sessionPath, const std::string& folder, int argc, char** argv) {
    RealFileSystem files;
    const auto session = openSessionFolder(files, sessionPath);
    if (!session)
        return complain(session.error());
    // Charts are drawn by the window system's library, which can do without a display.
    if (!hasDisplay())
        ::setenv("QT_QPA_PLATFORM", "offscreen", 0);
    const QApplication application(argc, argv);
    if (auto written = writeReport(files, *session, folder); !written)
        return complain(written.error());
    say(folder + "/report.html");
    return kDone;
}

} // namespace whichway
