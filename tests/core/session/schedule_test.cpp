// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/session/schedule.h"

#include "tests/support/small_study.h"

#include <algorithm>
#include <gtest/gtest.h>
#include <map>
#include <set>

using namespace whichway;

class ScheduleOfSeed : public ::testing::TestWithParam<int> {
protected:
    const Study study_ = smallStudy();
    const std::vector<ScheduledTrial> schedule_ =
        *drawSchedule(study_.protocol, static_cast<std::uint64_t>(GetParam()));

    int count(TrialKind kind) const {
        return static_cast<int>(
            std::count_if(schedule_.begin(), schedule_.end(),
                          [&](const ScheduledTrial& trial) { return trial.kind == kind; }));
    }
};

TEST_P(ScheduleOfSeed, HoldsEveryKindAsOftenAsTheProtocolSays) {
    const TrialSettings& wanted = study_.protocol.trials;
    EXPECT_EQ(count(TrialKind::Practice), wanted.practice);
    EXPECT_EQ(count(TrialKind::Main), wanted.main);
    EXPECT_EQ(count(TrialKind::HeldOut), wanted.heldOut);
    EXPECT_EQ(count(TrialKind::Repeat), wanted.repeat);
    EXPECT_EQ(count(TrialKind::Catch), wanted.catchTrials);
    EXPECT_EQ(count(TrialKind::Identical), wanted.identical);
}

TEST_P(ScheduleOfSeed, BeginsWithPracticeAndWeavesHeldOutPairsThroughAllThirds) {
    for (int i = 0; i < study_.protocol.trials.practice; ++i)
        EXPECT_EQ(schedule_[static_cast<std::size_t>(i)].kind, TrialKind::Practice);
    const std::size_t first = static_cast<std::size_t>(study_.protocol.trials.practice);
    int thirds[3] = {};
    for (std::size_t i = first; i < schedule_.size(); ++i)
        if (schedule_[i].kind == TrialKind::HeldOut)
            ++thirds[3 * (i - first) / (schedule_.size() - first)];
    for (const int third : thirds)
        EXPECT_GE(third, 2);
}

TEST_P(ScheduleOfSeed, RepeatsAnEarlierHeldOutPairWithItsSidesSwappedAtLeastFiveTrialsLater) {
    std::set<int> repeated;
    for (std::size_t i = 0; i < schedule_.size(); ++i) {
        if (schedule_[i].kind != TrialKind::Repeat)
            continue;
        const int of = schedule_[i].repeatOf;
        ASSERT_GE(of, 1);
        const ScheduledTrial& original = schedule_[static_cast<std::size_t>(of - 1)];
        EXPECT_EQ(original.kind, TrialKind::HeldOut);
        EXPECT_EQ(original.left, schedule_[i].right);
        EXPECT_EQ(original.right, schedule_[i].left);
        EXPECT_GE(static_cast<int>(i) + 1 - of, 5);
        EXPECT_TRUE(repeated.insert(of).second) << "a pair is repeated twice";
    }
}

TEST_P(ScheduleOfSeed, BalancesTheSidesOfMainAndHeldOutPairsWithinTwo) {
    int lead = 0;
    for (const ScheduledTrial& trial : schedule_)
        if (trial.kind == TrialKind::Main || trial.kind == TrialKind::HeldOut) {
            lead += trial.lowerLeft ? 1 : -1;
            EXPECT_LE(std::abs(lead), 2);
        }
    for (const ScheduledTrial& trial : schedule_)
        if (trial.kind == TrialKind::HeldOut) {
            EXPECT_EQ(trial.lowerLeft, trial.left < trial.right); // the names sort as the rows do
        }
}

TEST_P(ScheduleOfSeed, NamesTheBetterSideOfCatchPairsAndShowsIdenticalMotionsInTheSecondHalf) {
    for (std::size_t i = 0; i < schedule_.size(); ++i) {
        const ScheduledTrial& trial = schedule_[i];
        if (trial.kind == TrialKind::Catch) {
            const std::string& better = trial.expected == Side::Left ? trial.left : trial.right;
            EXPECT_TRUE(better == "extra4" || better == "extra3");
        }
        if (trial.kind == TrialKind::Identical) {
            EXPECT_EQ(trial.left, trial.right);
            EXPECT_GT(i, schedule_.size() / 2 - 2);
        }
    }
}

TEST_P(ScheduleOfSeed, IsTheSameForTheSameSeed) {
    EXPECT_EQ(schedule_, *drawSchedule(study_.protocol, static_cast<std::uint64_t>(GetParam())));
}

INSTANTIATE_TEST_SUITE_P(Seeds, ScheduleOfSeed, ::testing::Range(1, 51));

// Outside check: over many seeds each pair of the library is held out equally often (chi-square test).
TEST(Schedule, DrawsHeldOutPairsUniformly) {
    Study study = smallStudy(6);
    study.protocol.trials.heldOut = 3;
    study.protocol.trials.repeat = 0;
    std::map<std::pair<std::string, std::string>, int> counts;
    const int seeds = 4000;
    for (int seed = 0; seed < seeds; ++seed)
        for (const ScheduledTrial& trial : *drawSchedule(study.protocol, static_cast<std::uint64_t>(seed)))
            if (trial.kind == TrialKind::HeldOut)
                ++counts[std::minmax(trial.left, trial.right)];
    ASSERT_EQ(counts.size(), 15u);
    const double expected = seeds * 3 / 15.0;
    double chiSquare = 0;
    for (const auto& [pair, count] : counts)
        chiSquare += (count - expected) * (count - expected) / expected;
    EXPECT_LT(chiSquare, 36.1); // chi-square with 14 degrees of freedom, upper 0.1 % point
}

TEST(Schedule, SaysWhenTheLibraryIsTooSmall) {
    Study study = smallStudy(4);
    study.protocol.trials.heldOut = 4;
    const auto schedule = drawSchedule(study.protocol, 1);
    ASSERT_FALSE(schedule.ok());
    EXPECT_EQ(schedule.error().code, "session.schedule");
}

TEST(Schedule, KeepsCloseRepeatsAtTheEndOfAShortSession) {
    Study study = smallStudy(12);
    study.protocol.trials = {
        .practice = 0, .main = 2, .heldOut = 2, .repeat = 2, .catchTrials = 0, .identical = 0};
    for (std::uint64_t seed = 0; seed < 200; ++seed) {
        const auto schedule = drawSchedule(study.protocol, seed);
        ASSERT_TRUE(schedule.ok());
        for (std::size_t i = 0; i < schedule->size(); ++i)
            if ((*schedule)[i].kind == TrialKind::Repeat) {
                ASSERT_LE((*schedule)[i].repeatOf, static_cast<int>(i)) << "seed " << seed;
            }
    }
}
