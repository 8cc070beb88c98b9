// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/session/conductor.h"
#include "ui/session/playback.h"

#include <QObject>
#include <QString>
#include <QTimer>
#include <functional>
#include <memory>
#include <optional>

namespace whichway {

/// Everything a session in windows stands on. The references must outlive the controller.
struct SessionParts {
    const Study& study;
    FileSystem& files;
    const Clock& clock;
    std::unique_ptr<Planner> planner;
    std::string program = {}; ///< version
};

/// One running session between core and the windows: holds the conductor and its planner, keeps the grey
/// interval between pairs, holds the playback that stage and bench share, and says by signals that something
/// has changed. Nothing here blocks: the next pair is asked for when the grey interval is over, and again
/// until there is one. A step that could not be written becomes a trouble that stays until it was tried again
/// with success.
class SessionController final : public QObject {
    Q_OBJECT
public:
    static Result<std::unique_ptr<SessionController>> begin(SessionParts parts, const SessionSetup& setup);
    static Result<std::unique_ptr<SessionController>> resume(SessionParts parts, const SessionFolder& folder);

    const Study& study() const { return parts_.study; }
    const Texts& texts() const { return conductor_->texts(); }
    const SessionState& state() const { return conductor_->state(); }
    const SessionFolder& folder() const { return conductor_->folder(); }
    Conductor::PlannerStatus plannerStatus() const { return conductor_->plannerStatus(); }
    Prompt prompt() const { return conductor_->prompt(); }
    Playback& playback() { return playback_; }
    const Playback& playback() const { return playback_; }

    /// Grey interval: the last answer is saved, or a page was left, and the next pair is not there yet.
    bool isBetween() const { return between_; }
    /// The participant has waited for more than a second beyond the grey interval.
    bool isLate() const;
    double secondsRunning() const; ///< since this program began or took up the session

    /// Where the participant is, practice apart from the pairs that count.
    struct Progress {
        bool practice = false;
        int number = 0; ///< of the pair shown or just saved, from 1
        int total = 0;
        int breakAfter = 0; ///< number of the pair after which the next break comes; 0: none
    };
    Progress progress() const;

    struct Trouble {
        QString text = {}; ///< what could not be done
        Error error = {};
    };
    const std::optional<Trouble>& trouble() const { return trouble_; }
    void tryAgain();

    // What the participant or the experimenter asks for. What does not fit the moment changes nothing.
    // @return whether it is on disk.
    bool next();
    /// Refused until both motions were seen to the end.
    bool answer(int answer);
    bool undo();
    bool pause(const std::string& reason);
    bool goOn();
    bool note(const QString& text);
    bool stop(const std::string& by);

    /// Looks whether the next pair can be shown. Called by a timer; tests with a clock of their own call it
    /// too.
    void poll();

Q_SIGNALS:
    void changed();
    void presented(); ///< a pair is to be seen from its start, or again after an undo
    void ended();

private:
    using Step = std::function<Result<void>()>;

    explicit SessionController(SessionParts parts);

    bool perform(const QString& failure, const Step& step, const std::function<void()>& after = {});
    void startBetween();
    void present(bool seen);
    const Trajectory* motion(const std::string& name) const { return study().motion(name); }

    SessionParts parts_;
    std::unique_ptr<Conductor> conductor_; ///< uses the planner in parts_
    Playback playback_;
    QTimer polling_;
    bool between_ = false;
    std::chrono::nanoseconds betweenUntil_{0};
    std::chrono::nanoseconds began_{0};
    std::optional<Trouble> trouble_;
    std::function<void()> again_;
};

} // namespace whichway
