// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/session/playback.h"

#include "tests/support/manual_clock.h"

#include <QSignalSpy>
#include <gtest/gtest.h>

using namespace whichway;

namespace {

class Playing : public ::testing::Test {
protected:
    ManualClock clock;
    Playback playback{clock};

    void run(int milliseconds, int step = 50) {
        for (int t = 0; t < milliseconds; t += step) {
            clock.advance(std::chrono::milliseconds(step));
            playback.look();
        }
    }
};

} // namespace

TEST_F(Playing, StartsWithTheFirstPaintingHoweverLateThatIs) {
    playback.begin(2, 3);
    run(5000);
    EXPECT_EQ(playback.seconds(), 0);
    EXPECT_FALSE(playback.seen());
    EXPECT_EQ(playback.paintedSeconds(), 0);
    run(700);
    EXPECT_NEAR(playback.paintedSeconds(), 0.7, 1e-9);
}

TEST_F(Playing, OpensTheAnswerWhenTheLongerMotionHasEnded) {
    QSignalSpy opened(&playback, &Playback::opened);
    playback.begin(2, 3);
    playback.paintedSeconds();
    run(2950);
    EXPECT_FALSE(playback.seen());
    EXPECT_LT(playback.secondsOpen(), 0);
    run(50);
    EXPECT_TRUE(playback.seen());
    EXPECT_EQ(opened.count(), 1);
    run(1000);
    EXPECT_EQ(opened.count(), 1);
    EXPECT_NEAR(playback.secondsOpen(), 1.0, 1e-9);
    EXPECT_EQ(playback.seconds(), 3);
}

TEST_F(Playing, FollowsTheClockAndNotTheNumberOfLooks) {
    playback.begin(2, 2);
    playback.paintedSeconds();
    clock.advance(std::chrono::milliseconds(437));
    EXPECT_NEAR(playback.seconds(), 0.437, 1e-9);
    playback.look();
    playback.look();
    EXPECT_NEAR(playback.seconds(), 0.437, 1e-9);
}

TEST_F(Playing, StartsAgainWhenNoFrameWasDrawnForHalfASecond) {
    playback.begin(2, 2);
    playback.paintedSeconds();
    run(1000);
    clock.advance(std::chrono::seconds(30)); // e.g. the machine slept
    playback.look();
    EXPECT_FALSE(playback.seen());
    EXPECT_EQ(playback.interruptions(), 1);
    EXPECT_EQ(playback.replays(), 0);
    playback.paintedSeconds();
    run(2000);
    EXPECT_TRUE(playback.seen());
}

TEST_F(Playing, CountsReplaysAndKeepsTheAnswerOpen) {
    playback.begin(1, 1);
    playback.paintedSeconds();
    run(1000);
    playback.replay();
    EXPECT_TRUE(playback.seen());
    playback.paintedSeconds();
    run(300);
    EXPECT_NEAR(playback.seconds(), 0.3, 1e-9);
    EXPECT_EQ(playback.replays(), 1);
    EXPECT_TRUE(playback.isRunning());
}

TEST_F(Playing, LeavesTheTimeOfAHoldOut) {
    playback.begin(1, 1);
    playback.paintedSeconds();
    run(400);
    playback.hold();
    run(60000);
    EXPECT_NEAR(playback.seconds(), 0.4, 1e-9);
    playback.replay(); // refused meanwhile
    playback.release();
    EXPECT_NEAR(playback.seconds(), 0.4, 1e-9);
    run(600);
    EXPECT_TRUE(playback.seen());
    playback.hold();
    run(5000);
    playback.release();
    run(200);
    EXPECT_NEAR(playback.secondsOpen(), 0.2, 1e-9);
    EXPECT_EQ(playback.replays(), 0);
    EXPECT_EQ(playback.interruptions(), 0);
}

TEST_F(Playing, ShowsAPairThatWasSeenAtItsEndAndOpen) {
    playback.beginSeen(1.5, 2.3);
    EXPECT_TRUE(playback.seen());
    EXPECT_FALSE(playback.isRunning());
    EXPECT_EQ(playback.seconds(), 2.3);
    EXPECT_EQ(playback.secondsOpen(), 0);
    playback.clear();
    EXPECT_FALSE(playback.isShown());
    EXPECT_FALSE(playback.seen());
}
