// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/handover/weights_file.h"

#include "tests/support/answered_session.h"
#include "tests/support/small_study.h"

#include <cmath>
#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <nlohmann/json.hpp>

using namespace whichway;
using ::testing::HasSubstr;
using ::testing::Not;

namespace {

class Weights : public ::testing::Test {
protected:
    AnsweredSession session{smallStudy().protocol};
    SessionFindings findings;

    void SetUp() override {
        for (int i = 0; i < 6; ++i)
            session.add(TrialKind::Main, "m00" + std::to_string(i), "m00" + std::to_string(i + 1), 1 + i % 3);
        session.state.notes.push_back(
            {.trial = 1, .text = "PLANTED-NOTE", .time = "2026-03-03T14:05:00+01:00"});
        auto found = findSession(session.state, 3);
        ASSERT_TRUE(found.ok()) << describe(found.error());
        findings = std::move(*found);
    }

    std::string text() const { return weightsFile(session.state, findings); }
    nlohmann::json file() const { return nlohmann::json::parse(text()); }
};

TEST_F(Weights, ReadBackToTheSameNumbers) {
    const auto json = file();
    EXPECT_EQ(json.at("format"), 1);
    EXPECT_EQ(json.at("main_answers"), 6);
    ASSERT_EQ(json.at("features").size(), 3u);
    for (std::size_t j = 0; j < 3; ++j) {
        const auto& feature = json.at("features").at(j);
        const WeightFinding& weight = findings.weights.features[j];
        EXPECT_EQ(feature.at("name"), weight.feature);
        EXPECT_EQ(feature.at("unit"), "m");
        EXPECT_EQ(feature.at("direction").at("median").get<double>(), weight.direction.median);
        EXPECT_EQ(feature.at("direction").at("low").get<double>(), weight.direction.low);
        EXPECT_EQ(feature.at("standardised").at("high").get<double>(), weight.standardised.high);
        EXPECT_EQ(feature.at("per_unit").at("median").get<double>(), weight.perUnit.median);
        for (std::size_t k = 0; k < 3; ++k)
            EXPECT_EQ(json.at("covariance_standardised").at(j).at(k).get<double>(),
                      findings.weights.covariance(j, k));
    }
    EXPECT_EQ(json.at("sensitivity").at("high").get<double>(), findings.weights.sensitivity.high);
    EXPECT_EQ(json.at("sampling").at("converged"), findings.posterior.converged);
    EXPECT_EQ(json.at("sampling").at("seed").get<std::uint64_t>(), findings.sampler.seed);
    EXPECT_EQ(json.at("protocol_hash"), session.state.began.protocol.hash);
}

TEST_F(Weights, GiveAControllerTheUtilityThatTheDrawsGive) {
    // Per-unit weights times raw features differ from standardised weights times z by a constant alone.
    const auto json = file();
    const FeatureTable& table = session.state.began.protocol.table;
    for (std::size_t j = 0; j < 3; ++j) {
        const auto& feature = json.at("features").at(j);
        const double raw =
            feature.at("per_unit").at("median").get<double>() * (table.raw(4, j) - table.raw(9, j));
        const double z = feature.at("standardised").at("median").get<double>() *
                         (table.standardised(4, j) - table.standardised(9, j));
        EXPECT_NEAR(raw, z, 1e-9 * std::max(1.0, std::abs(z)));
    }
}

TEST_F(Weights, SayThatMotionsAreInventedAndSessionsPilots) {
    EXPECT_EQ(file().at("invented"), true);
    EXPECT_EQ(file().at("pilot"), false);
    session.state.began.kind = SessionKind::Simulated;
    EXPECT_EQ(file().at("pilot"), true);
    session.state.began.kind = SessionKind::Pilot;
    EXPECT_EQ(file().at("pilot"), true);
}

TEST_F(Weights, CarryTheCautions) {
    EXPECT_THAT(file().at("cautions").dump(), HasSubstr("not a safety case"));
    EXPECT_GE(file().at("cautions").size(), 5u);
}

TEST_F(Weights, HoldNoNumberForATradeOffThatIsNotDetermined) {
    for (TradeOff& tradeOff : findings.tradeOffs)
        tradeOff.determined = false;
    const auto whole = file(); // a loop over a part of a temporary would outlive it
    for (const auto& tradeOff : whole.at("trade_offs"))
        EXPECT_TRUE(tradeOff.at("change").is_null());
}

TEST_F(Weights, StayReadableWhereANumberIsNone) {
    findings.weights.features[0].perUnit.high = std::numeric_limits<double>::infinity();
    findings.posterior.summaries.at(0).rHat = std::numeric_limits<double>::quiet_NaN();
    EXPECT_TRUE(file().at("features").at(0).at("per_unit").at("high").is_null());
    EXPECT_TRUE(file().at("sampling").at("largest_r_hat").is_null())
        << "an unknown diagnostic is not a good one";
}

TEST_F(Weights, HoldNoNoteDateOrSession) {
    for (const std::string& planted :
         {std::string("PLANTED"), std::string("2026-"), session.state.began.session})
        EXPECT_THAT(text(), Not(HasSubstr(planted)));
}

} // namespace
