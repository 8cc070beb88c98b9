// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/line_conversation.h"

#include "app/terminal.h"
#include "core/session/line_protocol.h"

#include <algorithm>
#include <csignal>
#include <string>
#include <vector>

namespace whichway {
namespace {

using std::chrono::milliseconds;

/// Between two looks for a plan, and after a step that could not be written.
constexpr milliseconds kPlanPatience(50);
constexpr milliseconds kRetryInterval(1000);

bool sayAll(const std::vector<std::string>& lines) {
    for (const std::string& line : lines)
        if (!say(line))
            return false;
    return true;
}

/// How long to listen before the session goes on by itself.
milliseconds listeningTime(const Prompt& prompt, milliseconds interval) {
    switch (prompt.kind) {
    case PromptKind::Saved:
        return interval;
    case PromptKind::WaitingForPlan:
        return milliseconds(20);
    default:
        return milliseconds(0);
    }
}

bool sameMoment(const Prompt& one, const Prompt& other) {
    return one.kind == other.kind && one.trial == other.trial && one.page == other.page;
}

} // namespace

int converse(Conductor& conductor, bool resumed, LineReader& in, milliseconds interval) {
    std::signal(SIGPIPE, SIG_IGN); // a reader that went away is an outcome, not the end of this program
    // The last part of the interval is spent waiting for the plan that knows the last answer.
    conductor.setPatience(std::chrono::duration<double>(std::min(interval, kPlanPatience)).count());
    const milliseconds listening = interval - std::min(interval, kPlanPatience);

    LineSession session(conductor, resumed);
    bool heard = sayAll(session.start());
    bool inputEnded = false;
    bool stuck = false;
    while (heard && !session.ended()) {
        const Prompt before = conductor.prompt();
        const bool mayProceed = session.mayProceed();
        // After the very last answer nothing more is asked, so the session ends also when the input has.
        const bool allAnswered = before.kind == PromptKind::Saved && before.done == before.total;
        if (inputEnded && !allAnswered)
            break;
        std::string line;
        auto outcome = LineReader::Outcome::TimedOut;
        if (!inputEnded && mayProceed)
            outcome = in.read(line, stuck ? kRetryInterval : listeningTime(before, listening));
        else if (!inputEnded)
            outcome = in.read(line, std::nullopt);
        if (outcome == LineReader::Outcome::Ended) {
            inputEnded = true;
        } else if (outcome == LineReader::Outcome::Line) {
            heard = sayAll(session.handle(line));
        } else {
            heard = sayAll(session.proceed());
            stuck = before.kind != PromptKind::WaitingForPlan && sameMoment(before, conductor.prompt());
            if (stuck && inputEnded)
                break;
        }
    }
    if (session.ended())
        return kDone;
    complain(heard ? "The input ended before the session did. It can be taken up again with --resume."
                   : "Nobody reads the output any more. The session can be taken up again with --resume.");
    return kInputAtFault;
}

} // namespace whichway
