// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/session_state.h"

#include <string>

namespace whichway {

/// A session's state, built answer by answer, for tests of what is made of sessions. Invented.
struct AnsweredSession {
    SessionState state = {};

    explicit AnsweredSession(Protocol protocol, SessionKind kind = SessionKind::Participant) {
        state.began.session = std::string(32, 'a');
        state.began.kind = kind;
        state.began.program = "test";
        state.began.language = "en";
        state.began.seed = 11;
        state.began.protocol = std::move(protocol);
        state.firstTime = "2026-03-03T14:02:11.250+01:00";
        state.lastTime = state.firstTime;
        state.events = 1;
    }

    /// @return the trial's number
    int add(TrialKind kind, const std::string& left, const std::string& right, int answer,
            double responseTime = 4.5) {
        state.began.schedule.push_back({.kind = kind, .left = left, .right = right});
        const int trial = static_cast<int>(state.began.schedule.size());
        state.lastTime = "2026-03-03T14:" + std::string(trial < 50 ? "1" : "2") + std::to_string(trial % 10) +
                         ":00.000+01:00";
        state.answers.push_back({.trial = trial,
                                 .kind = kind,
                                 .left = left,
                                 .right = right,
                                 .answer = answer,
                                 .responseTime = responseTime,
                                 .time = state.lastTime,
                                 .information = kind == TrialKind::Main ? 0.75 : 0});
        state.events += 2;
        return trial;
    }

    /// The pair of `trial` again, sides swapped.
    int repeat(int trial, int answer) {
        const ScheduledTrial first = state.began.schedule.at(static_cast<std::size_t>(trial - 1));
        const int again = add(TrialKind::Repeat, first.right, first.left, answer);
        state.began.schedule.back().repeatOf = trial;
        return again;
    }

    int addCatch(Side expected, int answer) {
        const int trial = add(TrialKind::Catch, "extra4", "extra1", answer);
        state.began.schedule.back().expected = expected;
        return trial;
    }
};

} // namespace whichway
