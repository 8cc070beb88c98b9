// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/app/program.h"

#include <algorithm>
#include <cmath>
#include <gtest/gtest.h>
#include <nlohmann/json.hpp>
#include <regex>
#include <sstream>

namespace whichway::testing_support {
namespace {

std::string firstLine(const std::string& text) {
    return text.substr(0, text.find('\n'));
}

std::string simulatedSession(const std::string& study, const std::string& seed) {
    const Finished program =
        runProgram({"conduct", study, "--participant", "DEMO", "--answers", "simulated", "--seed", seed});
    EXPECT_EQ(program.exitCode, 0) << program.errors;
    return firstLine(program.output);
}

int linesOf(const std::string& text) {
    return static_cast<int>(std::count(text.begin(), text.end(), '\n'));
}

TEST(Check, NamesFileLineAndColumnOfEveryProblem) {
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    std::string text = contentOf(study + "/study.toml");
    const int lines = linesOf(text);
    text += "[planing]\nbatch = 5\n";
    std::ofstream(study + "/study.toml", std::ios::binary) << text;
    for (const std::vector<std::string>& command :
         {std::vector<std::string>{"check", study},
          std::vector<std::string>{"conduct", study, "--participant", "P1", "--answers", "stdio"},
          std::vector<std::string>{"conduct", study, "--participant", "P1", "--answers", "simulated"}}) {
        const Finished program = runProgram(command);
        EXPECT_EQ(program.exitCode, 1);
        EXPECT_EQ(program.output, "");
        EXPECT_NE(program.errors.find("study.toml:" + std::to_string(lines + 1) + ":2: "), std::string::npos)
            << program.errors;
        EXPECT_NE(program.errors.find("planing"), std::string::npos);
    }
    EXPECT_FALSE(std::filesystem::exists(study + "/pilots"));
}

TEST(Check, PrintsEveryMotionRawAndStandardised) {
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    const Finished program = runProgram({"check", study});
    ASSERT_EQ(program.exitCode, 0) << program.errors;
    EXPECT_EQ(program.errors, "");

    // The standardised columns, checked from the printed table alone: mean 0 and standard deviation 1, and
    // each rises with its raw column.
    std::vector<std::vector<double>> rows;
    bool inTable = false;
    std::istringstream output(program.output);
    for (std::string line; std::getline(output, line);) {
        if (line.rfind("Motion ", 0) == 0) {
            inTable = true;
            continue;
        }
        if (!inTable)
            continue;
        std::istringstream fields(line);
        std::string name;
        fields >> name;
        std::vector<double> row;
        for (double value = 0; fields >> value;)
            row.push_back(value);
        rows.push_back(row);
    }
    ASSERT_GE(rows.size(), 240u);
    const std::size_t dimension = rows[0].size() / 2;
    ASSERT_GE(dimension, 5u);
    ASSERT_LE(dimension, 8u);
    const auto count = static_cast<double>(rows.size());
    for (std::size_t j = 0; j < dimension; ++j) {
        double sum = 0, squares = 0;
        std::vector<std::pair<double, double>> rawAndStandardised;
        for (const auto& row : rows) {
            ASSERT_EQ(row.size(), 2 * dimension);
            const double z = row[dimension + j];
            sum += z;
            squares += z * z;
            rawAndStandardised.emplace_back(row[j], z);
        }
        EXPECT_NEAR(sum / count, 0, 1e-4) << j;
        EXPECT_NEAR(squares / count, 1, 1e-3) << j;
        std::sort(rawAndStandardised.begin(), rawAndStandardised.end());
        for (std::size_t i = 1; i < rows.size(); ++i)
            EXPECT_LE(rawAndStandardised[i - 1].second, rawAndStandardised[i].second) << j;
    }
}

TEST(SimulatedConduct, WritesAPilotWhoseReplayFindsNothingDifferentAndWhoseReportIsWhole) {
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    const std::string session = simulatedSession(study, "11");
    EXPECT_NE(session.find("/pilots/"), std::string::npos);
    EXPECT_FALSE(std::filesystem::exists(study + "/sessions"));

    const std::string journal = contentOf(session + "/journal.jsonl");
    const Finished replayed = runProgram({"replay", session});
    EXPECT_EQ(replayed.exitCode, 0) << replayed.errors;
    const std::regex identical("Journal +intact, [0-9]+ events\n"
                               "Trials +the same\n"
                               "Plans +the same \\([0-9]+ recomputed\\)\n"
                               "Estimates +the same, to the last bit\n");
    EXPECT_TRUE(std::regex_match(replayed.output, identical)) << replayed.output;

    const std::string to = (folder.path() / "a report").string();
    const Finished reported = runProgram({"report", session, "--to", to});
    EXPECT_EQ(reported.exitCode, 0) << reported.errors;
    EXPECT_EQ(firstLine(reported.output), to + "/report.html");
    const std::string html = contentOf(to + "/report.html");
    EXPECT_NE(html.find("</html>"), std::string::npos);
    EXPECT_EQ(html.find("<script"), std::string::npos);
    EXPECT_EQ(html.find("src=\"http"), std::string::npos);
    EXPECT_EQ(contentOf(to + "/trials.csv").find("DEMO"), std::string::npos);
    EXPECT_TRUE(std::filesystem::exists(to + "/codebook.csv"));

    const auto weights = nlohmann::json::parse(contentOf(to + "/weights.json"));
    EXPECT_EQ(weights["pilot"], true);
    EXPECT_EQ(weights["main_answers"], 40);
    double length = 0;
    for (const auto& feature : weights["features"]) {
        const auto& direction = feature["direction"];
        EXPECT_LE(direction["low"].get<double>(), direction["median"].get<double>());
        EXPECT_LE(direction["median"].get<double>(), direction["high"].get<double>());
        length += std::pow(direction["median"].get<double>(), 2);
    }
    EXPECT_NEAR(std::sqrt(length), 1, 0.1);
    EXPECT_EQ(contentOf(session + "/journal.jsonl"), journal) << "a report writes nothing into the session";
}

TEST(SimulatedConduct, OfTheSameSeedGivesTheSameAnswersAndOfAnotherDoesNot) {
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    const auto answersOf = [](const std::string& session) {
        std::istringstream lines(contentOf(session + "/journal.jsonl"));
        std::vector<std::string> answers;
        for (std::string line; std::getline(lines, line);) {
            const auto event = nlohmann::json::parse(line);
            if (event["payload"].contains("answer"))
                answers.push_back(event["payload"].dump());
        }
        return answers;
    };
    const auto first = answersOf(simulatedSession(study, "11"));
    EXPECT_EQ(first, answersOf(simulatedSession(study, "11")));
    EXPECT_NE(first, answersOf(simulatedSession(study, "12")));
    EXPECT_GE(first.size(), 40u);
}

TEST(Replay, RefusesAJournalThatWasEdited) {
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    const std::string session = simulatedSession(study, "11");
    std::string journal = contentOf(session + "/journal.jsonl");
    const std::size_t at = journal.find("\"answer\":");
    ASSERT_NE(at, std::string::npos);
    const std::size_t digit = journal.find_first_of("123", at);
    journal[digit] = journal[digit] == '1' ? '2' : '1';
    std::ofstream(session + "/journal.jsonl", std::ios::binary) << journal;
    for (const std::vector<std::string>& command :
         {std::vector<std::string>{"replay", session},
          std::vector<std::string>{"report", session, "--to", (folder.path() / "report").string()}}) {
        const Finished program = runProgram(command);
        EXPECT_EQ(program.exitCode, 1);
        EXPECT_NE(program.errors.find("journal.jsonl"), std::string::npos) << program.errors;
        EXPECT_EQ(program.output, "");
    }
}

TEST(MakeLibrary, MakesTheWardMotionsAgain) {
    const TemporaryFolder folder;
    const std::string to = (folder.path() / "library").string();
    const std::string recipe = std::string(WHICHWAY_SOURCE_DIR) + "/sample_studies/ward_cart/recipe.toml";
    const Finished program = runProgram({"make-library", recipe, "--to", to});
    ASSERT_EQ(program.exitCode, 0) << program.errors;
    int motions = 0;
    for (const auto& entry : std::filesystem::recursive_directory_iterator(to))
        motions += entry.path().extension() == ".csv" && entry.path().filename() != "library.csv";
    EXPECT_GE(motions, 240);
}

} // namespace
} // namespace whichway::testing_support
