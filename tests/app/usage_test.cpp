// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/app/program.h"

#include <gtest/gtest.h>

namespace whichway::testing_support {
namespace {

class WrongUsage : public testing::TestWithParam<std::vector<std::string>> {};

TEST_P(WrongUsage, EndsWithTwoAndNamesTheHelp) {
    const Finished program = runProgram(GetParam());
    EXPECT_EQ(program.exitCode, 2) << program.errors;
    EXPECT_EQ(program.output, "");
    EXPECT_NE(program.errors.find("--help"), std::string::npos) << program.errors;
}

INSTANTIATE_TEST_SUITE_P(
    Commands, WrongUsage,
    testing::Values(std::vector<std::string>{"--nonsense"}, std::vector<std::string>{"check"},
                    std::vector<std::string>{"conduct", "study"},
                    std::vector<std::string>{"conduct", "study", "--participant"},
                    std::vector<std::string>{"conduct", "study", "--participant", "A", "--answers", "oracle"},
                    std::vector<std::string>{"conduct", "study", "--participant", "A", "--seed", "some"},
                    std::vector<std::string>{"conduct", "study", "--participant", "A", "--answers",
                                             "simulated", "--agreement", "0.2"},
                    std::vector<std::string>{"conduct", "study", "--participant", "A", "--answers", "stdio",
                                             "--agreement", "0.8"},
                    std::vector<std::string>{"conduct", "study", "--participant", "A", "--interval", "1"},
                    std::vector<std::string>{"conduct", "study", "--participant", "A", "--resume", "--anew"},
                    std::vector<std::string>{"report", "session"}, std::vector<std::string>{"replay"},
                    std::vector<std::string>{"make-library", "recipe.toml"},
                    std::vector<std::string>{"study", "another"}));

TEST(Usage, HelpIsNoError) {
    for (const char* command : {"check", "conduct", "report", "replay", "make-library"}) {
        const Finished program = runProgram({command, "--help"});
        EXPECT_EQ(program.exitCode, 0);
        EXPECT_NE(program.output.find(command), std::string::npos);
        EXPECT_EQ(program.errors, "");
    }
}

TEST(Usage, WhatIsNotThereIsTheInputsFault) {
    const TemporaryFolder folder;
    const std::string nowhere = (folder.path() / "nowhere").string();
    const std::vector<std::vector<std::string>> commands = {
        {"check", nowhere},
        {"conduct", nowhere, "--participant", "A", "--answers", "stdio"},
        {"report", nowhere, "--to", (folder.path() / "report").string()},
        {"replay", nowhere},
        {"make-library", nowhere, "--to", (folder.path() / "library").string()}};
    for (const auto& command : commands) {
        const Finished program = runProgram(command);
        EXPECT_EQ(program.exitCode, 1) << command[0];
        EXPECT_NE(program.errors.find("nowhere"), std::string::npos) << command[0] << ": " << program.errors;
        EXPECT_EQ(program.output, "") << command[0];
    }
}

TEST(Usage, ACodeThatIsNoCodeIsRefusedBeforeAnythingIsWritten) {
    const TemporaryFolder folder;
    const std::string study = copyOfWardCart(folder);
    const Finished program = runProgram({"conduct", study, "--participant", "../P1", "--answers", "stdio"});
    EXPECT_EQ(program.exitCode, 1);
    EXPECT_FALSE(std::filesystem::exists(study + "/sessions"));
}

} // namespace
} // namespace whichway::testing_support
