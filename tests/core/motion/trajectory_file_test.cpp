// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/trajectory_file.h"

#include "core/random.h"

#include <cmath>
#include <gmock/gmock.h>
#include <numbers>

namespace whichway {
namespace {

using std::numbers::pi;
using testing::ElementsAre;
using testing::HasSubstr;

/// "CODE LINE:COLUMN" of each problem.
std::vector<std::string> problemsOf(const std::string& content) {
    std::vector<std::string> told;
    for (const Error& problem : parseTrajectory(content, "m.csv").problems) {
        EXPECT_EQ(problem.place.file, "m.csv");
        EXPECT_FALSE(problem.message.empty()) << problem.code;
        EXPECT_FALSE(problem.remedy.empty()) << problem.code;
        told.push_back(problem.code + " " + std::to_string(problem.place.line) + ":" +
                       std::to_string(problem.place.column));
    }
    return told;
}

Trajectory read(const std::string& content) {
    TrajectoryReading reading = parseTrajectory(content, "m.csv");
    for (const Error& problem : reading.problems)
        ADD_FAILURE() << describe(problem);
    return reading.trajectory;
}

TEST(ParseTrajectory, ReadsColumnsInAnyOrderWithPeople) {
    const Trajectory motion =
        read("person2_y_m,y_m,x_m,person1_x_m,time_s,heading_rad,person2_x_m,person1_y_m\n"
             "8,3,2,5,10,0.5,7,6\n80,30,20,50,11.5,0.6,70,60\n");
    EXPECT_THAT(motion.time, ElementsAre(0, 1.5)); // from the first sample's 0
    EXPECT_THAT(motion.x, ElementsAre(2, 20));
    EXPECT_THAT(motion.y, ElementsAre(3, 30));
    EXPECT_THAT(motion.heading, ElementsAre(0.5, 0.6));
    ASSERT_EQ(motion.people.size(), 2u);
    EXPECT_THAT(motion.people[0].x, ElementsAre(5, 50));
    EXPECT_THAT(motion.people[0].y, ElementsAre(6, 60));
    EXPECT_THAT(motion.people[1].x, ElementsAre(7, 70));
    EXPECT_THAT(motion.people[1].y, ElementsAre(8, 80));
}

TEST(ParseTrajectory, ReadsFilesOfOtherSystems) {
    EXPECT_EQ(read("\xEF\xBB\xBFtime_s,x_m,y_m\r\n0,0,0\r\n1,1e-1,2\r\n").x[1], 0.1);
}

TEST(ParseTrajectory, TakesAMissingHeadingFromTheMovement) {
    const Trajectory motion = read("time_s,x_m,y_m\n0,0,0\n1,1,0\n2,1,1\n3,0,1\n4,0,0\n5,1,0\n");
    ASSERT_EQ(motion.heading.size(), 6u);
    EXPECT_NEAR(motion.heading[0], 0, 1e-12);
    EXPECT_NEAR(motion.heading[1], pi / 2, 1e-12);
    EXPECT_NEAR(motion.heading[2], pi, 1e-12);
    EXPECT_NEAR(motion.heading[3], 1.5 * pi, 1e-12) << "goes on, not back";
    EXPECT_NEAR(motion.heading[4], 2 * pi, 1e-12);
    EXPECT_NEAR(motion.heading[5], 2 * pi, 1e-12);
}

TEST(ParseTrajectory, TurnsNothingWhileTheRobotStands) {
    // Stands, drives along -y, stands with a millimetre of noise, drives on.
    const Trajectory motion =
        read("time_s,x_m,y_m\n0,0,0\n0.5,0,0\n1,0,0\n1.5,0,-1\n2,0,-2\n2.5,0.001,-2\n3,0,-2.001\n3.5,0,-3\n");
    for (const double heading : motion.heading)
        EXPECT_NEAR(heading, -pi / 2, 0.01);
    const Trajectory still = read("time_s,x_m,y_m\n0,1,1\n1,1,1\n");
    EXPECT_THAT(still.heading, ElementsAre(0, 0));
}

TEST(ParseTrajectory, UnwrapsARecordedHeading) {
    const Trajectory motion =
        read("time_s,x_m,y_m,heading_rad\n0,0,0,3.0\n1,0,0,-3.0\n2,0,0,-2.9\n3,0,0,3.1\n");
    EXPECT_NEAR(motion.heading[1], 2 * pi - 3, 1e-12);
    EXPECT_NEAR(motion.heading[2], 2 * pi - 2.9, 1e-12);
    EXPECT_NEAR(motion.heading[3], 3.1, 1e-12);
}

TEST(ParseTrajectory, NamesTheRightUnitOfEveryQuantity) {
    const auto reading = parseTrajectory(
        "time_ms,x_cm,y_mm,heading_deg,person1_x_cm,person1_y_mm\n0,0,0,0,0,0\n1,1,1,1,1,1\n", "m.csv");
    std::vector<std::string> right;
    for (const Error& problem : reading.problems) {
        EXPECT_EQ(problem.code, "trajectory.unit");
        EXPECT_EQ(problem.place.line, 1);
        ASSERT_EQ(problem.values.size(), 2u);
        EXPECT_THAT(problem.remedy, HasSubstr(problem.values[1]));
        right.push_back(problem.values[1]);
    }
    EXPECT_THAT(right, ElementsAre("time_s", "x_m", "y_m", "heading_rad", "person1_x_m", "person1_y_m"));
}

TEST(ParseTrajectory, NamesTheNearestColumnOnceAndNotAlsoAsMissing) {
    EXPECT_THAT(problemsOf("tme_s,x_m,y_m\n0,0,0\n1,1,1\n"), ElementsAre("trajectory.unknown-column 1:1"));
    EXPECT_THAT(parseTrajectory("tme_s,x_m,y_m\n0,0,0\n1,1,1\n", "m.csv").problems[0].remedy,
                HasSubstr("time_s"));
}

TEST(ParseTrajectory, NamesAllFaultsOfAHeader) {
    EXPECT_THAT(problemsOf("time_ms,mood_of_the_day,person2_x_m\n0,0,0\n1,1,1\n"),
                ElementsAre("trajectory.unit 1:1", "trajectory.unknown-column 1:9",
                            "trajectory.missing-column 1:1", "trajectory.missing-column 1:1",
                            "trajectory.missing-column 1:1", "trajectory.missing-column 1:1",
                            "trajectory.missing-column 1:1"));
}

TEST(ParseTrajectory, HasOneNameForEachPerson) {
    EXPECT_THAT(problemsOf("time_s,x_m,y_m,person1_x_m,person1_y_m,person01_x_m\n0,0,0,0,0,0\n1,1,1,1,1,1\n"),
                ElementsAre("trajectory.unknown-column 1:40"));
    EXPECT_THAT(problemsOf("time_s,x_m,y_m,person0_x_m\n0,0,0,0\n1,1,1,1\n"),
                ElementsAre("trajectory.unknown-column 1:16"));
    EXPECT_THAT(problemsOf("time_s,x_m,y_m,person51_x_m\n0,0,0,0\n1,1,1,1\n"),
                ElementsAre("trajectory.unknown-column 1:16"));
    EXPECT_THAT(problemsOf("time_s,x_m,y_m,person99999999999999999999_x_m\n0,0,0,0\n1,1,1,1\n"),
                ElementsAre("trajectory.unknown-column 1:16"));
}

TEST(ParseTrajectory, NamesEveryWrongTime) {
    EXPECT_THAT(problemsOf("x_m,time_s,y_m\n0,0,0\n1,1,0\n2,1,0\n3,0.5,0\n4,2,0\n5,1.5,0\n"),
                ElementsAre("trajectory.time-repeats 4:3", "trajectory.time-backward 5:3",
                            "trajectory.time-backward 7:3"));
}

TEST(ParseTrajectory, RecognisesMilliseconds) {
    EXPECT_THAT(problemsOf("x_m,time_s,y_m\n0,0,0\n1,50,0\n2,100,0\n"),
                ElementsAre("trajectory.time-looks-like-ms 1:5"));
    EXPECT_THAT(problemsOf("x_m,time_s,y_m\n0,0,0\n1,0.05,0\n2,60,0\n3,60.05,0\n"), ElementsAre())
        << "one long gap is no unit";
}

TEST(ParseTrajectory, NamesEveryBadCellInOrderOfTheFile) {
    EXPECT_THAT(problemsOf("time_s,x_m,y_m\n0,a,0\n1,1,\n2,nan,20000\n"),
                ElementsAre("csv.not-a-number 2:3", "csv.missing 3:5", "csv.not-finite 4:3",
                            "trajectory.too-far 4:7"));
}

TEST(ParseTrajectory, TellsTheSameFaultTwentyTimesAtMost) {
    std::string content = "time_s,x_m,y_m\n", backward = content;
    for (int i = 0; i < 1000; ++i) {
        content += std::to_string(i) + ",x,0\n";
        backward += std::to_string(-i) + ",0,0\n";
    }
    EXPECT_EQ(problemsOf(content).size(), 20u);
    EXPECT_EQ(problemsOf(backward).size(), 20u);
}

TEST(ParseTrajectory, RefusesTooFewAndTooManySamples) {
    EXPECT_THAT(problemsOf("time_s,x_m,y_m\n"), ElementsAre("trajectory.too-short 1:1"));
    EXPECT_THAT(problemsOf("time_s,x_m,y_m\n0,0,0\n"), ElementsAre("trajectory.too-short 1:1"));
    std::string content = "time_s,x_m,y_m\n";
    for (int i = 0; i < 20000; ++i)
        content += std::to_string(i) + ",0,0\n";
    EXPECT_EQ(read(content).time.size(), 20000u);
    EXPECT_THAT(problemsOf(content + "20000,0,0\n"), ElementsAre("trajectory.too-long 20002:1"));
}

class WrittenTrajectory : public testing::TestWithParam<int> {};

TEST_P(WrittenTrajectory, ReadsBackAsItWasRounded) {
    Random random(static_cast<std::uint64_t>(GetParam()));
    const auto rounded = [&](double scale) {
        return std::round((random.uniform() - 0.5) * 20 * scale) / scale;
    };
    Trajectory motion;
    motion.people.resize(static_cast<std::size_t>(GetParam() % 3));
    for (int i = 0; i < 40; ++i) {
        motion.time.push_back(i / 20.0);
        motion.x.push_back(rounded(1e4));
        motion.y.push_back(rounded(1e4));
        motion.heading.push_back(std::round(1e4 * std::sin(0.1 * i)) / 1e4);
        for (PersonTrack& person : motion.people) {
            person.x.push_back(rounded(1e4));
            person.y.push_back(rounded(1e4));
        }
    }
    EXPECT_EQ(read(writeTrajectory(motion, 4)), motion);
}

INSTANTIATE_TEST_SUITE_P(Seeds, WrittenTrajectory, testing::Range(1, 11));

TEST(WriteTrajectory, RoundsAndWritesNoNegativeZero) {
    Trajectory motion;
    motion.time = {0, 0.0333333};
    motion.x = {-0.00001, 1.23456};
    motion.y = {0, 2};
    motion.heading = {-0.0, 0.5};
    EXPECT_EQ(writeTrajectory(motion, 3), "time_s,x_m,y_m,heading_rad\n0,0,0,0\n0.033,1.235,2,0.5\n");
}

} // namespace
} // namespace whichway
