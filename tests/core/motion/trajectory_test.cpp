// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/trajectory.h"

#include <gtest/gtest.h>

namespace whichway {
namespace {

Trajectory motion() {
    Trajectory motion;
    motion.time = {2, 3, 5};
    motion.x = {0, 1, 5};
    motion.y = {0, -1, -1};
    motion.heading = {0, 1, 2};
    motion.people = {{.x = {4, 4, 0}, .y = {1, 2, 2}}};
    return motion;
}

TEST(InstantAt, IsTheSampleAtItsTime) {
    const Instant instant = instantAt(motion(), 1);
    EXPECT_EQ(instant.x, 1);
    EXPECT_EQ(instant.y, -1);
    EXPECT_EQ(instant.heading, 1);
    ASSERT_EQ(instant.people.size(), 1u);
    EXPECT_EQ(instant.people[0].x, 4);
    EXPECT_EQ(instant.people[0].y, 2);
}

TEST(InstantAt, LiesOnTheLineBetweenSamples) {
    const Instant instant = instantAt(motion(), 1.5);
    EXPECT_DOUBLE_EQ(instant.x, 2);
    EXPECT_DOUBLE_EQ(instant.y, -1);
    EXPECT_DOUBLE_EQ(instant.heading, 1.25);
    EXPECT_DOUBLE_EQ(instant.people[0].x, 3);
}

TEST(InstantAt, StandsStillBeforeTheStartAndAfterTheEnd) {
    EXPECT_EQ(instantAt(motion(), -7).x, 0);
    EXPECT_EQ(instantAt(motion(), 3).x, 5);
    EXPECT_EQ(instantAt(motion(), 99).heading, 2);
    EXPECT_EQ(instantAt(motion(), 99).people[0].x, 0);
}

TEST(InstantAt, OfNothingIsTheOrigin) {
    const Instant instant = instantAt({}, 1);
    EXPECT_EQ(instant.x, 0);
    EXPECT_TRUE(instant.people.empty());
}

} // namespace
} // namespace whichway
