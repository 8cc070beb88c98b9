// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/session_list.h"

#include "core/journal/journal.h"
#include "core/journal/session_state.h"

#include <QCoreApplication>
#include <QDateTime>
#include <QLocale>
#include <algorithm>

namespace whichway {
namespace {

QString translated(const char* text) {
    return QCoreApplication::translate("sessions", text);
}

} // namespace

Result<std::vector<SessionRow>> listSessions(const FileSystem& files, const std::string& study) {
    auto folders = listSessionFolders(files, study);
    if (!folders)
        return folders.error();
    std::vector<SessionRow> rows;
    for (const SessionFolder& folder : *folders) {
        SessionRow row{.folder = folder,
                       .kind = folder.pilot ? SessionKind::Pilot : SessionKind::Participant};
        const auto reading = readJournal(files, folder.journal());
        if (!reading) {
            row.problem = reading.error();
            rows.push_back(row);
            continue;
        }
        // The program ended while the session began: there is nothing in it to show or to take up.
        if (reading->records.empty())
            continue;
        const auto state = replayRecords(reading->records);
        if (!state) {
            row.problem = state.error();
        } else {
            row.kind = state->began.kind;
            row.answered = static_cast<int>(state->answers.size());
            row.total = static_cast<int>(state->began.schedule.size());
            row.began = state->firstTime;
            row.state = !state->ended                               ? SessionRow::State::Unfinished
                        : state->ended->how == SessionEnd::Finished ? SessionRow::State::Finished
                                                                    : SessionRow::State::Stopped;
        }
        rows.push_back(row);
    }
    std::stable_sort(rows.begin(), rows.end(),
                     [](const auto& a, const auto& b) { return a.began > b.began; });
    return rows;
}

QString sessionStateText(const SessionRow& row) {
    const auto counted = [&](const char* text) { return translated(text).arg(row.answered).arg(row.total); };
    switch (row.state) {
    case SessionRow::State::Finished:
        return counted(QT_TRANSLATE_NOOP("sessions", "finished, %1 of %2 trials"));
    case SessionRow::State::Stopped:
        return counted(QT_TRANSLATE_NOOP("sessions", "stopped after %1 of %2 trials"));
    case SessionRow::State::Unfinished:
        return counted(QT_TRANSLATE_NOOP("sessions", "not ended, %1 of %2 trials are safe"));
    case SessionRow::State::Unreadable:
        return translated(QT_TRANSLATE_NOOP("sessions", "cannot be read: %1"))
            .arg(QString::fromStdString(describe(row.problem)));
    }
    return {};
}

QString sessionTimeText(const SessionRow& row) {
    const auto time = QDateTime::fromString(QString::fromStdString(row.began), Qt::ISODateWithMs);
    return time.isValid() ? QLocale(QLocale::English).toString(time, QStringLiteral("d MMMM yyyy, HH:mm"))
                          : QString();
}

} // namespace whichway
