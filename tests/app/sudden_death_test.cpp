// SPDX-License-Identifier: GPL-3.0-or-later
// The program is killed at moments drawn from a seed; what it had confirmed must be on disk afterwards.
// WHICHWAY_KILLS says how often (30 by default), WHICHWAY_KILL_SEED which moments.
#include "tests/app/scripted_participant.h"

#include "core/files/file_system.h"
#include "core/files/sha256.h"
#include "core/journal/journal.h"
#include "core/journal/session_state.h"
#include "core/random.h"

#include <chrono>
#include <gtest/gtest.h>
#include <set>
#include <thread>

namespace whichway::testing_support {
namespace {

int fromEnvironment(const char* name, int otherwise) {
    const char* value = std::getenv(name);
    return value ? std::atoi(value) : otherwise;
}

void letPass(double milliseconds) {
    std::this_thread::sleep_for(std::chrono::duration<double, std::milli>(milliseconds));
}

/// What the outside script knows of the session that is going on.
struct Books {
    std::map<int, std::string> confirmed = {}; ///< digest of each trial whose answer was confirmed
    std::optional<int> inFlight = {}; ///< trial that was answered and not confirmed when the program died
};

/// The digest that "saved" lines carry, from its definition in core/session/line_protocol.h.
std::string digestOf(int trial, const std::string& left, const std::string& right, int answer) {
    return sha256(std::to_string(trial) + " " + left + " " + right + " " + std::to_string(answer));
}

/// Goes on with the session; kills the program in the middle of things if `linesToLive` is given.
/// @return whether the session was finished
bool goOn(const std::vector<std::string>& command, Books& books, std::optional<int> linesToLive,
          double startMilliseconds, Random& random, std::string& session) {
    ScriptedParticipant person(command);
    if (linesToLive == 0) {
        letPass(random.uniform() * startMilliseconds);
        person.child().kill();
    }
    int lines = 0;
    for (auto said = person.hear(); said; said = person.hear(), ++lines) {
        const std::string type = (*said)["type"].get<std::string>();
        EXPECT_NE(type, "refused") << said->dump();
        if (type == "saved") {
            const int trial = (*said)["trial"].get<int>();
            const std::string digest = (*said)["digest"].get<std::string>();
            const auto known = books.confirmed.find(trial);
            if (known != books.confirmed.end())
                EXPECT_EQ(known->second, digest) << "trial " << trial << " changed after it was confirmed";
            else
                EXPECT_TRUE(books.inFlight == trial) << "nobody answered trial " << trial;
            books.confirmed[trial] = digest;
            books.inFlight.reset();
        } else if (type == "pair" || type == "practice") {
            const int trial = (*said)["trial"].get<int>();
            EXPECT_EQ(books.confirmed.count(trial), 0u) << "trial " << trial << " is asked again";
            person.say(ScriptedParticipant::answerTo(*said));
            books.inFlight = trial;
        }
        if (linesToLive && lines + 1 == *linesToLive) {
            letPass(random.uniform() * 4);
            person.child().kill();
        }
    }
    const bool finished = !person.heard.empty() && person.heard.back()["type"] == "finished";
    const int code = person.child().finish();
    if (!linesToLive)
        EXPECT_EQ(code, 0) << person.child().errors();
    else
        EXPECT_TRUE(code == -SIGKILL || (code == 0 && finished)) << code << ": " << person.child().errors();
    if (const std::string path = sessionPathIn(person.child().errors()); !path.empty())
        session = path;
    return finished;
}

/// Every confirmed answer stands in the journal exactly once, with the content that was confirmed, and
/// nothing else does but possibly the one that was in flight.
void compare(const Books& books, const std::string& session) {
    const RealFileSystem files;
    const auto reading = readJournal(files, session + "/journal.jsonl");
    ASSERT_TRUE(reading) << describe(reading.error());
    const auto state = replayRecords(reading->records);
    ASSERT_TRUE(state) << describe(state.error());
    std::map<int, std::string> onDisk;
    for (const AnsweredTrial& answer : state->answers)
        onDisk[answer.trial] = digestOf(answer.trial, answer.left, answer.right, answer.answer);
    std::map<int, int> given;
    for (const Record& record : reading->records)
        if (const auto* answer = std::get_if<AnswerGiven>(&record.event))
            ++given[answer->trial];
    for (const auto& [trial, times] : given)
        EXPECT_EQ(times, 1) << "trial " << trial;
    if (books.inFlight)
        onDisk.erase(*books.inFlight);
    EXPECT_EQ(onDisk, books.confirmed);
}

enum class Stage { NothingWritten, Unfinished, Ended };

/// A session whose first event was never completed holds nothing to go on with.
Stage stageOf(const std::string& session) {
    const RealFileSystem files;
    const auto reading = readJournal(files, session + "/journal.jsonl");
    if (!reading || reading->records.empty())
        return Stage::NothingWritten;
    return replayRecords(reading->records).value().ended ? Stage::Ended : Stage::Unfinished;
}

TEST(SuddenDeath, AtAnyMomentOfASessionLosesNoConfirmedAnswerAndTheSessionCanBeFinished) {
    const int kills = fromEnvironment("WHICHWAY_KILLS", 30) * 4 / 5;
    const auto seed = static_cast<std::uint64_t>(fromEnvironment("WHICHWAY_KILL_SEED", 1));
    SCOPED_TRACE("WHICHWAY_KILL_SEED=" + std::to_string(seed));
    Random random(seed);
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    const std::vector<std::string> begin = {"conduct",    study, "--participant", "P1", "--answers", "stdio",
                                            "--interval", "0",   "--seed",        "3"};
    std::vector<std::string> resume = begin;
    resume.push_back("--resume");

    // How long a start takes decides nothing but where the early kills fall.
    const auto before = std::chrono::steady_clock::now();
    (void)runProgram({"check", study});
    const double start =
        1.5 * std::chrono::duration<double, std::milli>(std::chrono::steady_clock::now() - before).count();

    Books books;
    std::string session;
    for (int done = 0; done < kills; ++done) {
        const bool goingOn = !session.empty() && stageOf(session) == Stage::Unfinished;
        const int lines = random.below(4) == 0 ? 0 : 1 + static_cast<int>(random.below(12));
        (void)goOn(goingOn ? resume : begin, books, lines, start, random, session);
        if (session.empty()) {
            // Killed before it could say where. If it got as far as an unfinished session, the next start
            // refuses to begin a second one and names the first; else that start begins one.
            const Finished look = runProgram(begin);
            session = sessionPathIn(look.errors);
            if (session.empty()) {
                const std::size_t end = look.errors.find(": This participant's session");
                ASSERT_NE(end, std::string::npos) << look.errors;
                session = look.errors.substr(0, end);
            }
        }
        compare(books, session);
        if (testing::Test::HasFailure())
            return;
        if (stageOf(session) == Stage::Ended) {
            books = {};
            session.clear();
        }
    }
    EXPECT_TRUE(goOn(session.empty() ? begin : resume, books, std::nullopt, start, random, session));
    EXPECT_FALSE(books.inFlight);
    compare(books, session);
    const Finished replayed = runProgram({"replay", session});
    EXPECT_EQ(replayed.exitCode, 0) << replayed.output << replayed.errors;
}

TEST(SuddenDeath, OfAReportLeavesTheSessionAsItWasAndTheReportCanBeWrittenAgain) {
    const int kills = fromEnvironment("WHICHWAY_KILLS", 30) - fromEnvironment("WHICHWAY_KILLS", 30) * 4 / 5;
    Random random(static_cast<std::uint64_t>(fromEnvironment("WHICHWAY_KILL_SEED", 1)));
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    const Finished simulated =
        runProgram({"conduct", study, "--participant", "P1", "--answers", "simulated", "--seed", "3"});
    ASSERT_EQ(simulated.exitCode, 0) << simulated.errors;
    const std::string session = simulated.output.substr(0, simulated.output.find('\n'));
    const std::string journal = contentOf(session + "/journal.jsonl");
    const std::string to = (folder.path() / "report").string();
    const std::vector<std::string> command = {"report", session, "--to", to};

    const auto before = std::chrono::steady_clock::now();
    ASSERT_EQ(runProgram(command).exitCode, 0);
    const double time =
        std::chrono::duration<double, std::milli>(std::chrono::steady_clock::now() - before).count();
    const std::string weights = contentOf(to + "/weights.json");
    for (int done = 0; done < kills; ++done) {
        {
            ChildProcess child(programWith(command), {"DISPLAY=", "WAYLAND_DISPLAY="});
            letPass(random.uniform() * time);
            child.kill();
        }
        EXPECT_EQ(contentOf(session + "/journal.jsonl"), journal);
        // A file is there whole or not at all.
        EXPECT_EQ(contentOf(to + "/weights.json"), weights);
    }
    EXPECT_EQ(runProgram(command).exitCode, 0);
    EXPECT_EQ(contentOf(to + "/weights.json"), weights);
}

} // namespace
} // namespace whichway::testing_support
