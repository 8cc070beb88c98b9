// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/commands/conduct.h"

#include "app/commands/study_folder.h"
#include "app/commands/windows.h"
#include "app/line_conversation.h"
#include "app/line_reader.h"
#include "app/terminal.h"
#include "core/preference/model_of_protocol.h"
#include "core/random.h"
#include "core/rehearsal/simulated_session.h"
#include "core/session/conductor.h"
#include "core/session/planning_request.h"
#include "core/session/unfinished_session.h"

#include <cmath>
#include <fmt/core.h>
#include <memory>
#include <random>
#include <unistd.h>
#include <utility>

namespace whichway {
namespace {

// Parts of a simulated session's seed; the session itself uses the seed as it is.
constexpr std::uint64_t kPersonPart = 101;
constexpr std::uint64_t kAnswersPart = 102;

std::uint64_t seedFromSystem() {
    std::random_device device;
    return (std::uint64_t{device()} << 32) | device();
}

SessionKind kindOf(const ConductOptions& options) {
    if (options.answers == AnswersFrom::Simulated)
        return SessionKind::Simulated;
    return options.pilot ? SessionKind::Pilot : SessionKind::Participant;
}

/// The session to take up: the participant's newest unfinished one with --resume, else none. A participant
/// with an unfinished session does not silently get a second one. A simulated participant may.
Result<std::optional<SessionFolder>> sessionToResume(const FileSystem& files, const Study& study,
                                                     const ConductOptions& options) {
    const bool mayHaveUnfinished = options.anew || options.answers == AnswersFrom::Simulated;
    if (!options.resume && mayHaveUnfinished)
        return std::optional<SessionFolder>();
    auto unfinished = unfinishedSessions(files, study.folder, options.participant);
    if (!unfinished)
        return unfinished.error();
    if (options.resume && unfinished->empty())
        return Error{.code = "session.nothing-unfinished",
                     .place = {.file = study.folder},
                     .message = "This participant has no unfinished session.",
                     .remedy = "Begin one without --resume.",
                     .values = {}};
    if (options.resume)
        return std::optional(unfinished->back().folder);
    if (unfinished->empty())
        return std::optional<SessionFolder>();
    const UnfinishedSession& last = unfinished->back();
    return Error{.code = "session.unfinished",
                 .place = {.file = last.folder.path},
                 .message = fmt::format("This participant's session of {} is unfinished: {} of {} trials are "
                                        "answered, and its last event is of {}.",
                                        last.began, last.answered, last.total, last.last),
                 .remedy = "Take it up with --resume, or begin another with --anew.",
                 .values = {}};
}

int simulate(Conductor& conductor, const ConductOptions& options) {
    const SessionBegan& began = conductor.state().began;
    if (began.kind != SessionKind::Simulated)
        return complain(Error{.code = "session.not-simulated",
                              .place = {.file = conductor.folder().path},
                              .message = "This session is not a simulated participant's.",
                              .remedy = "Take it up with --answers screen or --answers stdio.",
                              .values = {}});
    const ResponseModel model = responseModelOf(began.protocol);
    auto person = makePerson(began.protocol.table.standardised, model, {.agreement = options.agreement},
                             deriveSeed(began.seed, kPersonPart));
    if (!person)
        return complain(person.error());
    const SimulatedParticipant participant(*person, model, deriveSeed(began.seed, kAnswersPart));
    if (conductor.state().notes.empty())
        if (auto noted = conductor.note(
                fmt::format("Simulated participant: seed {}, agreement {}", began.seed, options.agreement));
            !noted)
            return complain(noted.error());
    if (auto conducted = conductSimulated(conductor, participant); !conducted)
        return complain(conducted.error());
    return say(conductor.folder().path) ? kDone : kInputAtFault;
}

} // namespace

int conduct(const ConductOptions& given, int argc, char** argv) {
    ConductOptions options = given;
    LineReader input(STDIN_FILENO);
    if (options.participant == "-") {
        if (input.read(options.participant, std::nullopt) != LineReader::Outcome::Line)
            return complain(Error{.code = "session.code",
                                  .place = {},
                                  .message = "Standard input holds no participant code.",
                                  .remedy = "Write the code as its first line.",
                                  .values = {}});
    }
    if (auto checked = checkParticipantCode(options.participant); !checked)
        return complain(checked.error());

    RealFileSystem files;
    const auto study = openStudy(files, options.study);
    if (!study)
        return kInputAtFault;
    const auto resumed = sessionToResume(files, *study, options);
    if (!resumed)
        return complain(resumed.error());
    if (!options.seed)
        options.seed = seedFromSystem();
    const SessionSetup setup{.kind = kindOf(options),
                             .code = options.participant,
                             .language = options.language,
                             .seed = *options.seed,
                             .id = ""};
    if (options.answers == AnswersFrom::Screen)
        return conductOnScreen(*study, setup, *resumed, argc, argv);

    const RealClock clock;
    const auto problem = planningProblemOf(study->protocol);
    std::unique_ptr<Planner> planner;
    if (options.answers == AnswersFrom::Simulated)
        planner = std::make_unique<ImmediatePlanner>(problem);
    else
        planner = std::make_unique<PlanningWorker>(problem);
    const Surroundings surroundings{
        .files = files, .clock = clock, .planner = *planner, .program = WHICHWAY_VERSION};
    auto conductor = *resumed ? Conductor::resume(*study, **resumed, surroundings)
                              : Conductor::begin(*study, setup, surroundings);
    if (!conductor)
        return complain(conductor.error());
    if (options.answers == AnswersFrom::Simulated)
        return simulate(**conductor, options);

    complain("Session: " + (*conductor)->folder().path);
    const double interval = options.interval.value_or(study->protocol.trials.greyInterval);
    return converse(**conductor, options.resume, input,
                    std::chrono::milliseconds(std::llround(interval * 1000)));
}

} // namespace whichway
