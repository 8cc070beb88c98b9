// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/trajectory_file.h"

#include <gtest/gtest.h>

using namespace whichway;

namespace {

std::string faultOf(const std::string& content) {
    const TrajectoryReading reading = parseTrajectory(content, "t.csv");
    if (reading.problems.empty())
        return "";
    const Error& first = reading.problems.front();
    return first.code + " " + std::to_string(first.place.line) + ":" + std::to_string(first.place.column);
}

} // namespace

TEST(Trajectory, StandsStillBeforeItsStartAndAfterItsEndAndIsStraightBetweenSamples) {
    const Trajectory motion{.name = "m",
                            .time = {0, 1, 3},
                            .x = {0, 2, 2},
                            .y = {1, 1, 5},
                            .heading = {0, 0, 1},
                            .people = {{.x = {4, 5, 5}, .y = {0, 0, 2}}}};
    EXPECT_DOUBLE_EQ(instantAt(motion, -1).x, 0);
    EXPECT_DOUBLE_EQ(instantAt(motion, 0.25).x, 0.5);
    EXPECT_DOUBLE_EQ(instantAt(motion, 2).y, 3);
    EXPECT_DOUBLE_EQ(instantAt(motion, 2).people.at(0).y, 1);
    EXPECT_DOUBLE_EQ(instantAt(motion, 99).y, 5);
    EXPECT_DOUBLE_EQ(instantAt(motion, 99).heading, 1);
}

TEST(TrajectoryFile, TakesTheHeadingFromTheMovementWhereThereIsNone) {
    const TrajectoryReading reading =
        parseTrajectory("time_s,x_m,y_m\n2,0,0\n3,0,1\n4,0,1\n5,-1,1\n", "t.csv");
    ASSERT_TRUE(reading.problems.empty());
    EXPECT_DOUBLE_EQ(reading.trajectory.time.front(), 0);
    EXPECT_NEAR(reading.trajectory.heading[0], 1.5707963, 1e-6);
    EXPECT_NEAR(reading.trajectory.heading[1], 1.5707963, 1e-6); // standing still
    EXPECT_NEAR(reading.trajectory.heading[3], 3.1415926, 1e-6);
}

TEST(TrajectoryFile, PlacesEveryFault) {
    EXPECT_EQ(faultOf("time_ms,x_m,y_m\n0,0,0\n1,1,1\n"), "trajectory.unit 1:1");
    EXPECT_EQ(faultOf("time_s,x_cm,y_m\n0,0,0\n1,1,1\n"), "trajectory.unit 1:8");
    EXPECT_EQ(faultOf("time_s,x_m,y_m,speeed\n0,0,0,0\n1,1,1,1\n"), "trajectory.unknown-column 1:16");
    EXPECT_EQ(faultOf("time_s,x_m\n0,0\n1,1\n"), "trajectory.missing-column 1:1");
    EXPECT_EQ(faultOf("time_s,x_m,y_m,person1_x_m\n0,0,0,0\n1,1,1,1\n"), "trajectory.missing-column 1:1");
    EXPECT_EQ(faultOf("time_s,x_m,y_m\n0,0,0\n"), "trajectory.too-short 1:1");
    EXPECT_EQ(faultOf("time_s,x_m,y_m\n0,0,0\n1,1,1\n1,2,2\n"), "trajectory.time-repeats 4:1");
    EXPECT_EQ(faultOf("time_s,x_m,y_m\n0,0,0\n2,1,1\n1,2,2\n"), "trajectory.time-backward 4:1");
    EXPECT_EQ(faultOf("time_s,x_m,y_m\n0,0,0\n50,1,1\n100,2,2\n"), "trajectory.time-looks-like-ms 1:1");
    EXPECT_EQ(faultOf("time_s,x_m,y_m\n0,0,0\n1,nan,1\n"), "csv.not-finite 3:3");
    EXPECT_EQ(faultOf("time_s,x_m,y_m\n0,0,0\n1,99999,1\n"), "trajectory.too-far 3:3");
}

TEST(TrajectoryFile, ReadsBackWhatItWrites) {
    const Trajectory motion{.name = "",
                            .time = {0, 0.05, 0.1},
                            .x = {1, 1.12345, -2},
                            .y = {0, 0.5, 1},
                            .heading = {0, 0.1, -0.2},
                            .people = {{.x = {3, 3, 3.5}, .y = {1, 1, 1}}}};
    const TrajectoryReading reading = parseTrajectory(writeTrajectory(motion, 5), "t.csv");
    ASSERT_TRUE(reading.problems.empty());
    EXPECT_EQ(reading.trajectory, motion);
}
