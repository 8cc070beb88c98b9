// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/app/scripted_participant.h"

#include "core/files/file_system.h"
#include "core/files/sha256.h"
#include "core/journal/journal.h"
#include "core/journal/session_state.h"

#include <algorithm>
#include <gtest/gtest.h>

namespace whichway::testing_support {
namespace {

SessionState stateOf(const std::string& session) {
    const RealFileSystem files;
    const auto reading = readJournal(files, session + "/journal.jsonl");
    return replayRecords(reading.value().records).value();
}

std::vector<std::string> conductByLines(const std::string& study, const std::string& participant) {
    return {"conduct",    study, "--participant", participant, "--answers", "stdio",
            "--interval", "0",   "--seed",        "5"};
}

/// Answers `count` pairs, the first of which is `pair`. @return the pair that stands next
std::optional<Json> answerSome(ScriptedParticipant& person, Json pair, int count,
                               std::map<int, int>& answers) {
    std::optional<Json> next = std::move(pair);
    for (int i = 0; i < count && next; ++i) {
        const Json answer = ScriptedParticipant::answerTo(*next);
        answers[(*next)["trial"].get<int>()] = ScriptedParticipant::numberOf(answer);
        person.say(answer);
        next = person.hearPair();
    }
    return next;
}

TEST(LineSession, OfFortyAnswersKeepsEveryAnswerThroughUndoPauseBadLinesAndAnInterruption) {
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    std::map<int, int> answers;
    std::string session;
    std::string lastDigest;
    int lastTrial = 0;
    {
        ScriptedParticipant person(conductByLines(study, "P07"));
        auto pair = person.hearPair();
        ASSERT_TRUE(pair) << person.child().errors();
        EXPECT_EQ(person.heard.front()["type"], "instruction");
        EXPECT_EQ((*pair)["type"], "practice");
        EXPECT_EQ((*pair)["trial"], 1);
        pair = answerSome(person, *pair, 4, answers);
        ASSERT_TRUE(pair);
        EXPECT_EQ((*pair)["type"], "pair");

        // Lines that are no answers to this pair: each refused with a reason, and the pair stands.
        const int trial = (*pair)["trial"].get<int>();
        const std::vector<std::string> badLines = {
            "not json",
            "[1, 2]",
            R"({"choice":"left","confidence":1})",
            R"({"type":"answer","choice":"up","confidence":1})",
            R"({"type":"answer","choice":"left"})",
            R"({"type":"answer","choice":"left","confidence":99})",
            R"({"type":"answer","choice":"left","confidence":1.5})",
            R"({"type":"answer","choice":"left","confidence":1,"trial":)" + std::to_string(trial + 1) + "}",
            R"({"type":"answer","choice":"left","confidence":1,"mood":"good"})",
            R"({"type":"answer","choice":"left","confidence":1,"response_time":-3})",
            R"({"type":"dance"})",
            R"({"type":"note"})",
            R"({"type":"go on"})",
            std::string(200000, 'x')};
        for (const std::string& line : badLines) {
            person.child().writeLine(line);
            const auto reply = person.hear();
            ASSERT_TRUE(reply);
            EXPECT_EQ((*reply)["type"], "refused") << line.substr(0, 80);
            EXPECT_FALSE((*reply)["reason"].get<std::string>().empty());
        }
        pair = answerSome(person, *pair, 1, answers);
        ASSERT_TRUE(pair);

        // An answer and its undoing in one breath; the same pair comes back and gets another answer.
        Json first = ScriptedParticipant::answerTo(*pair);
        first["choice"] = first["choice"] == "left" ? "right" : "left";
        person.child().write(first.dump() + "\n" + R"({"type":"undo"})" + "\n");
        EXPECT_EQ((*person.hear())["type"], "saved");
        const auto undone = person.hear();
        EXPECT_EQ((*undone)["type"], "undone");
        EXPECT_EQ((*undone)["trial"], (*pair)["trial"]);
        const auto again = person.hearPair();
        ASSERT_TRUE(again);
        EXPECT_EQ((*again)["trial"], (*pair)["trial"]);
        EXPECT_EQ((*again)["left"], (*pair)["left"]);
        EXPECT_EQ((*again)["right"], (*pair)["right"]);
        person.say({{"type", "undo"}});
        EXPECT_EQ((*person.hear())["type"], "refused") << "there is no second undo";
        pair = answerSome(person, *again, 3, answers);
        ASSERT_TRUE(pair);

        person.say({{"type", "pause"}});
        EXPECT_EQ((*person.hear())["type"], "paused");
        person.say(ScriptedParticipant::answerTo(*pair));
        EXPECT_EQ((*person.hear())["type"], "refused") << "nothing is answered during a pause";
        person.say({{"type", "go on"}});
        const auto resumedPair = person.hear();
        EXPECT_EQ((*resumedPair)["trial"], (*pair)["trial"]);
        person.say({{"type", "note"}, {"text", "Asked for “water”."}});
        EXPECT_EQ((*person.hear())["type"], "noted");

        pair = answerSome(person, *pair, 6, answers);
        ASSERT_TRUE(pair);
        EXPECT_EQ(person.child().finish(), 1) << "the input ended before the session did";
        session = sessionPathIn(person.child().errors());
        for (const Json& said : person.heard)
            if (said["type"] == "saved") {
                lastTrial = said["trial"].get<int>();
                lastDigest = said["digest"].get<std::string>();
            }
    }
    ASSERT_NE(session, "");

    const Finished second = runProgram(conductByLines(study, "P07"));
    EXPECT_EQ(second.exitCode, 1);
    EXPECT_NE(second.errors.find("--resume"), std::string::npos) << second.errors;

    {
        auto command = conductByLines(study, "P07");
        command.push_back("--resume");
        ScriptedParticipant person(command);
        const auto saved = person.hear();
        ASSERT_TRUE(saved) << person.child().errors();
        EXPECT_EQ((*saved)["type"], "saved");
        EXPECT_EQ((*saved)["trial"], lastTrial);
        EXPECT_EQ((*saved)["digest"], lastDigest);
        auto pair = person.hearPair();
        ASSERT_TRUE(pair);
        pair = answerSome(person, *pair, 40 - static_cast<int>(answers.size()), answers);
        ASSERT_TRUE(pair);
        person.say({{"type", "stop"}});
        const auto finished = person.hear();
        ASSERT_TRUE(finished);
        EXPECT_EQ((*finished)["type"], "finished");
        EXPECT_EQ((*finished)["how"], "stopped");
        EXPECT_EQ((*finished)["answers"], 40);
        EXPECT_EQ(person.child().finish(), 0) << person.child().errors();
        EXPECT_EQ(sessionPathIn(person.child().errors()), session);
    }

    const SessionState state = stateOf(session);
    ASSERT_TRUE(state.ended);
    EXPECT_EQ(state.ended->how, SessionEnd::Stopped);
    EXPECT_EQ(state.undone, 1);
    EXPECT_EQ(state.pauses, 1);
    ASSERT_EQ(state.notes.size(), 1u);
    EXPECT_EQ(state.notes[0].text, "Asked for “water”.");
    std::map<int, int> onDisk;
    for (const AnsweredTrial& answer : state.answers) {
        EXPECT_TRUE(onDisk.emplace(answer.trial, answer.answer).second) << "trial " << answer.trial;
        EXPECT_EQ(answer.responseTime, 2.5);
    }
    EXPECT_EQ(onDisk, answers);

    auto command = conductByLines(study, "P07");
    command.push_back("--resume");
    EXPECT_EQ(runProgram(command).exitCode, 1) << "a stopped session is not taken up again";
}

TEST(LineSession, TakesTheCodeFromStandardInputAndKeepsItOutOfSight) {
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    const std::string code = "SECRETCODE42";
    ScriptedParticipant person(conductByLines(study, "-"));
    person.child().writeLine(code);
    auto pair = person.hearPair();
    ASSERT_TRUE(pair) << person.child().errors();
    for (const char* what : {"cmdline", "environ"})
        EXPECT_EQ(contentOf("/proc/" + std::to_string(person.child().id()) + "/" + what).find(code),
                  std::string::npos)
            << what;
    person.say(ScriptedParticipant::answerTo(*pair));
    ASSERT_TRUE(person.hearPair());
    person.say({{"type", "stop"}});
    EXPECT_EQ(person.child().finish(), 0);
    EXPECT_EQ(person.child().output().find(code), std::string::npos);
    EXPECT_EQ(person.child().errors().find(code), std::string::npos);

    const std::string session = sessionPathIn(person.child().errors());
    int filesWithCode = 0;
    for (const auto& entry : std::filesystem::recursive_directory_iterator(study)) {
        EXPECT_EQ(entry.path().string().find(code), std::string::npos);
        if (entry.is_regular_file() && contentOf(entry.path()).find(code) != std::string::npos) {
            ++filesWithCode;
            EXPECT_EQ(entry.path().string(), session + "/participant.txt");
        }
    }
    EXPECT_EQ(filesWithCode, 1);
}

TEST(LineSession, AnsweredToTheLastPairEndsAlsoWhenTheInputDoes) {
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    auto command = conductByLines(study, "P08");
    command.push_back("--pilot");
    ScriptedParticipant person(command);
    std::map<int, int> answers;
    auto pair = person.hearPair();
    ASSERT_TRUE(pair) << person.child().errors();
    const int total = (*pair)["total"].get<int>();
    pair = answerSome(person, *pair, total - 1, answers);
    ASSERT_TRUE(pair);
    answers[(*pair)["trial"].get<int>()] =
        ScriptedParticipant::numberOf(ScriptedParticipant::answerTo(*pair));
    person.say(ScriptedParticipant::answerTo(*pair));
    EXPECT_EQ(person.child().finish(), 0) << person.child().errors();
    while (person.hear()) {
    }
    EXPECT_EQ(person.heard.back()["type"], "finished");
    EXPECT_EQ(person.heard.back()["how"], "finished");

    const std::string session = sessionPathIn(person.child().errors());
    EXPECT_NE(session.find("/pilots/"), std::string::npos);
    const SessionState state = stateOf(session);
    std::map<int, int> onDisk;
    for (const AnsweredTrial& answer : state.answers)
        onDisk[answer.trial] = answer.answer;
    EXPECT_EQ(onDisk, answers);
    EXPECT_EQ(onDisk.size(), static_cast<std::size_t>(total));
    EXPECT_TRUE(std::any_of(person.heard.begin(), person.heard.end(),
                            [](const Json& said) { return said["type"] == "break"; }));
}

} // namespace
} // namespace whichway::testing_support
