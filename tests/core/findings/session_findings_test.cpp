// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/session_findings.h"

#include "core/findings/session_posterior.h"
#include "core/random.h"
#include "tests/support/answered_session.h"
#include "tests/support/small_study.h"

#include <cmath>
#include <gtest/gtest.h>

using namespace whichway;

namespace {

/// A person who likes the first feature and dislikes the third, at `count` random pairs of a kind.
void answerPairs(AnsweredSession& session, int count, TrialKind kind, std::uint64_t seed) {
    Random random(seed);
    const FeatureTable& table = session.state.began.protocol.table;
    for (int i = 0; i < count; ++i) {
        const std::size_t left = random.below(table.motions.size());
        const std::size_t right = (left + 1 + random.below(table.motions.size() - 1)) % table.motions.size();
        const double eta = 2 * (table.standardised(left, 0) - table.standardised(right, 0)) -
                           2 * (table.standardised(left, 2) - table.standardised(right, 2));
        const bool choosesLeft = random.uniform() < 1 / (1 + std::exp(-eta));
        const int level = std::abs(eta) < 1 ? 1 : (std::abs(eta) < 3 ? 2 : 3);
        session.add(kind, table.motions[left], table.motions[right], choosesLeft ? level : -level);
    }
}

TEST(SessionFindings, FindTheDirectionOfAPersonsWeights) {
    AnsweredSession session(smallStudy().protocol);
    answerPairs(session, 40, TrialKind::Main, 3);
    answerPairs(session, 10, TrialKind::HeldOut, 4);
    const auto found = findSession(session.state, 10);
    ASSERT_TRUE(found.ok()) << describe(found.error());
    const double half = std::sqrt(0.5);
    EXPECT_GT(half * found->weights.meanDirection[0] - half * found->weights.meanDirection[2], 0.9);
    EXPECT_EQ(found->mainAnswers, 40);
    EXPECT_GE(found->prediction.heldOut.count, 7);
    EXPECT_EQ(found->prediction.heldOut.of, 10);
}

TEST(SessionFindings, ShowTheCourseUpToTheFinalEstimate) {
    AnsweredSession session(smallStudy().protocol);
    answerPairs(session, 12, TrialKind::Main, 3);
    const auto found = findSession(session.state, 5);
    ASSERT_TRUE(found.ok());
    ASSERT_EQ(found->course.size(), 3u);
    EXPECT_EQ(found->course[0].answers, 5);
    EXPECT_EQ(found->course[1].answers, 10);
    EXPECT_EQ(found->course[2].answers, 12);
    EXPECT_EQ(found->course[2].sensitivity.median, found->weights.sensitivity.median);
    EXPECT_EQ(found->course[2].direction[1].low, found->weights.features[1].direction.low);
}

TEST(SessionFindings, AreTheSameBitsForWhoeverReadsTheSession) {
    AnsweredSession session(smallStudy().protocol);
    answerPairs(session, 8, TrialKind::Main, 5);
    const auto one = findSession(session.state), two = findSession(session.state);
    ASSERT_TRUE(one.ok() && two.ok());
    EXPECT_EQ(one->posterior.draws, two->posterior.draws);
}

TEST(SessionFindings, LearnFromMainTrialsAlone) {
    AnsweredSession session(smallStudy().protocol);
    answerPairs(session, 8, TrialKind::Main, 5);
    const auto before = findSession(session.state);
    const int heldOut = session.add(TrialKind::HeldOut, "m000", "m001", 3);
    session.repeat(heldOut, 3);
    session.addCatch(Side::Left, -3);
    session.add(TrialKind::Identical, "m002", "m002", 3);
    session.add(TrialKind::Practice, "extra1", "extra2", 3);
    const auto after = findSession(session.state);
    ASSERT_TRUE(before.ok() && after.ok());
    EXPECT_EQ(before->posterior.draws, after->posterior.draws);
}

TEST(SessionFindings, WithoutAMainAnswerSayThatThereIsNothingToLearnFrom) {
    AnsweredSession session(smallStudy().protocol);
    answerPairs(session, 3, TrialKind::HeldOut, 5);
    const auto found = findSession(session.state);
    ASSERT_FALSE(found.ok());
    EXPECT_EQ(found.error().code, "session.no-answers");
}

TEST(SessionFindings, StopWhenAsked) {
    AnsweredSession session(smallStudy().protocol);
    answerPairs(session, 8, TrialKind::Main, 5);
    std::stop_source stop;
    stop.request_stop();
    const auto found = findSession(session.state, 5, stop.get_token());
    ASSERT_FALSE(found.ok());
    EXPECT_EQ(found.error().code, kCancelled);
}

TEST(SessionFindings, RefuseACourseWithoutSteps) {
    AnsweredSession session(smallStudy().protocol);
    EXPECT_THROW(static_cast<void>(findSession(session.state, 0)), std::invalid_argument);
}

} // namespace
