// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/session/conductor.h"

#include <string>
#include <string_view>
#include <vector>

namespace whichway {

/// A session conducted over lines of JSON, so that a button box, a script or a robot's console can stand in
/// for the stage. One JSON object a line in each direction, UTF-8. No line carries the participant's code.
///
/// Out, "type" and further fields:
///   instruction  page, pages, text (no reply needed)           break     text (no reply needed)
///   practice     trial, kind, left, right, question, confidence (the words), cannot_tell (true or false),
///   done, total pair         the same                                      waiting   no pair is ready yet
///   saved        trial, digest: SHA-256 of "TRIAL LEFT RIGHT ANSWER" (ANSWER from -K to K): it is on disk
///   undone       trial                                         paused, noted
///   refused      reason: the line before was not taken, and the pair stands
///   finished     how ("finished" or "stopped"), text, answers
/// In:
///   answer       choice ("left", "right" or "cannot tell"), confidence (1 … K, not with "cannot tell"), and
///                optionally trial (refused unless it is on the stage), response_time (s), replays
///   undo         takes the last answer back until the next pair is out
///   pause, go on, note (text), stop
///
/// Text in, text out: reading, writing and waiting are the caller's.
class LineSession {
public:
    /// `conductor` must outlive it. A resumed session first repeats the last saved trial.
    explicit LineSession(Conductor& conductor, bool resumed);

    /// What to write first.
    std::vector<std::string> start();
    /// What to write in reply to one line.
    std::vector<std::string> handle(std::string_view line);
    /// True while the program should go on by itself, by `proceed`, once the moment for `undo` is over.
    bool mayProceed() const;
    std::vector<std::string> proceed();
    bool ended() const;

private:
    std::vector<std::string> promptLines();
    std::string savedLine() const;

    Conductor& conductor_;
    bool resumed_;
};

} // namespace whichway
