// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/random.h"
#include "core/study/library_check.h"
#include "core/study/standardise.h"
#include "tests/core/study/reference_table.h"

#include <algorithm>
#include <cmath>
#include <gmock/gmock.h>

namespace whichway {
namespace {

/// A study with `count` motions of 4 s and two features that vary freely.
Study sound(std::size_t count = 40) {
    Study study;
    study.protocol.features.resize(2);
    study.protocol.features[0].name = "clearance";
    study.protocol.features[1].name = "speed";
    for (FeatureDefinition& feature : study.protocol.features) {
        feature.label = feature.name;
        feature.unit = "1";
    }
    Random random(7);
    Matrix raw(count, 2);
    const std::size_t side =
        count == 40 ? 8 : 10; // a grid with a little noise, so that no two motions are close
    for (std::size_t i = 0; i < count; ++i) {
        raw(i, 0) = 1 + (static_cast<double>(i % side) + 0.2 * random.uniform()) / 10;
        raw(i, 1) = 1 + (static_cast<double>(i / side) + 0.2 * random.uniform()) / 10;
    }
    study.protocol.table.raw = raw;
    for (const std::string& name : reference::motions(count)) {
        study.protocol.table.motions.push_back(name);
        Trajectory motion;
        motion.name = name;
        motion.time = {0, 4};
        study.motions.push_back(motion);
    }
    return study;
}

std::vector<LibraryFinding> findingsOf(Study study) {
    StandardisedTable table =
        standardise(study.protocol.table.motions, study.protocol.table.raw, study.protocol.features);
    EXPECT_TRUE(table.faults.empty());
    study.protocol.table = table.table;
    return checkLibrary(study, summarise(study.protocol.table));
}

std::vector<std::string> codesOf(const std::vector<LibraryFinding>& findings) {
    std::vector<std::string> codes;
    for (const LibraryFinding& finding : findings) {
        codes.push_back(finding.code);
        EXPECT_FALSE(finding.message.empty() || finding.effect.empty() || finding.remedy.empty());
        EXPECT_GT(finding.count, 0u);
    }
    return codes;
}

using testing::ElementsAre;

TEST(LibraryCheck, FindsNothingInASoundLibrary) {
    EXPECT_THAT(codesOf(findingsOf(sound())), ElementsAre());
}

TEST(LibraryCheck, NamesTwoFeaturesThatMoveTogether) {
    Study study = sound();
    for (std::size_t i = 0; i < 40; ++i)
        study.protocol.table.raw(i, 1) =
            5 - study.protocol.table.raw(i, 0) + 0.05 * study.protocol.table.raw(i, 1);
    const auto findings = findingsOf(study);
    EXPECT_THAT(codesOf(findings), ElementsAre("library.same-features", "library.follows-from-others",
                                               "library.follows-from-others", "library.near-duplicates"));
    EXPECT_THAT(findings[0].features, ElementsAre("clearance", "speed"));
    EXPECT_LT(findings[0].value, -0.9);
}

TEST(LibraryCheck, SeesThatAFeatureFollowsFromTwoOthersThoughNoPairDoes) {
    Study study = sound(100);
    study.protocol.features.push_back(study.protocol.features[1]);
    study.protocol.features[2].name = study.protocol.features[2].label = "sum";
    Matrix raw(100, 3);
    for (std::size_t i = 0; i < 100; ++i) {
        raw(i, 0) = study.protocol.table.raw(i, 0);
        raw(i, 1) = study.protocol.table.raw(i, 1);
        raw(i, 2) = raw(i, 0) + raw(i, 1);
    }
    study.protocol.table.raw = raw;
    const auto findings = findingsOf(study);
    EXPECT_THAT(codesOf(findings), ElementsAre("library.follows-from-others", "library.follows-from-others",
                                               "library.follows-from-others"));
    EXPECT_TRUE(std::isinf(findings[2].value));
}

TEST(LibraryCheck, NamesAFeatureThatIsAlmostConstant) {
    Study shared = sound();
    for (std::size_t i = 0; i < 33; ++i)
        shared.protocol.table.raw(i, 0) = 1.5;
    const auto findings = findingsOf(shared);
    ASSERT_THAT(codesOf(findings), testing::Contains("library.almost-constant"));
    const auto found = std::find_if(findings.begin(), findings.end(),
                                    [](const auto& f) { return f.code == "library.almost-constant"; });
    EXPECT_NEAR(found->value, 33.0 / 40, 1e-15);

    Study narrow = sound();
    for (std::size_t i = 0; i < 40; ++i)
        narrow.protocol.table.raw(i, 0) += 100;
    EXPECT_THAT(codesOf(findingsOf(narrow)), ElementsAre("library.almost-constant"));
}

TEST(LibraryCheck, NamesASkewedFeatureAndItsOutliers) {
    Study study = sound();
    study.protocol.table.raw(11, 1) = 2.6;
    const auto findings = findingsOf(study);
    EXPECT_THAT(codesOf(findings), ElementsAre("library.skewed", "library.outlier"));
    EXPECT_GT(findings[0].value, 2);
    EXPECT_THAT(findings[1].motions, ElementsAre("m11"));
    EXPECT_GT(findings[1].value, 4);
}

TEST(LibraryCheck, NamesMotionsThatNearlyDuplicateEachOther) {
    Study study = sound();
    for (std::size_t j = 0; j < 2; ++j)
        study.protocol.table.raw(30, j) = study.protocol.table.raw(3, j);
    const auto findings = findingsOf(study);
    ASSERT_THAT(codesOf(findings), ElementsAre("library.near-duplicates"));
    EXPECT_THAT(findings[0].motions, testing::Contains("m3 ≈ m30"));
    EXPECT_EQ(findings[0].value, 0);
}

TEST(LibraryCheck, WarnsOfUnequalLengthsUnlessAFeatureTellsThem) {
    Study study = sound();
    for (std::size_t i = 0; i < 40; ++i)
        study.motions[i].time.back() = 4 + 0.15 * static_cast<double>(i % 2);
    auto findings = findingsOf(study);
    ASSERT_THAT(codesOf(findings), ElementsAre("library.unequal-lengths"));
    EXPECT_EQ(findings[0].weight, LibraryFinding::Weight::Warning);
    EXPECT_NEAR(findings[0].value, 0.15, 1e-12);

    for (std::size_t i = 0; i < 40; ++i)
        study.motions[i].time.back() = 4 * study.protocol.table.raw(i, 1);
    findings = findingsOf(study);
    ASSERT_THAT(codesOf(findings), ElementsAre("library.unequal-lengths"));
    EXPECT_EQ(findings[0].weight, LibraryFinding::Weight::Note);
    EXPECT_THAT(findings[0].features, ElementsAre("speed"));
}

TEST(LibraryCheck, AcceptsLengthsThatDifferByATenthOfASecond) {
    Study study = sound();
    study.motions[5].time.back() = 4.1;
    EXPECT_THAT(codesOf(findingsOf(study)), ElementsAre());
}

TEST(LibraryCheck, CountsLongMotionsAndNamesTheFirstTen) {
    Study study = sound();
    for (Trajectory& motion : study.motions)
        motion.time.back() = 10.5;
    const auto findings = findingsOf(study);
    ASSERT_THAT(codesOf(findings), ElementsAre("library.long-motions"));
    EXPECT_EQ(findings[0].count, 40u);
    EXPECT_EQ(findings[0].motions.size(), kMotionsNamed);
}

TEST(LibraryCheck, NamesMotionsThatNobodyWillSee) {
    Study study = sound();
    for (const char* name : {"p1", "p2", "p3"}) {
        study.motions.push_back(study.motions.front());
        study.motions.back().name = name;
    }
    study.protocol.practicePairs = {{"p1", "p3"}};
    const auto findings = findingsOf(study);
    ASSERT_THAT(codesOf(findings), ElementsAre("library.unused-motions"));
    EXPECT_THAT(findings[0].motions, ElementsAre("p2"));
}

// The expected values are double integrals over w and h by scipy.integrate.quad (scipy 1.10.1) for two
// motions that lie 2 apart in one feature.
TEST(SelfAgreement, AgreesWithNumericalIntegration) {
    Matrix z(2, 1);
    z.values = {-1, 1};
    EXPECT_NEAR(impliedSelfAgreement(z, {1.0, 0.0, 0.0}, 5, 40000, 1).mean, 0.6971472451989207, 0.004);
    EXPECT_NEAR(impliedSelfAgreement(z, {2.45, 0.6, 0.05}, 6, 40000, 1).mean, 0.8010093279005317, 0.004);
}

TEST(SelfAgreement, IsTheSameForTheSameSeedAndOrdered) {
    const StandardisedTable table =
        standardise(reference::motions(8), reference::matrixOf(reference::kRaw), reference::features());
    const PriorOfPeople prior{2.45 / 2, 0.6, 0.05};
    const SelfAgreement a = impliedSelfAgreement(table.table.standardised, prior, 1, 200, 50);
    const SelfAgreement b = impliedSelfAgreement(table.table.standardised, prior, 1, 200, 50);
    EXPECT_EQ(a.mean, b.mean);
    EXPECT_LT(a.fifth, a.mean);
    EXPECT_LT(a.mean, a.ninetyFifth);
    EXPECT_GE(a.fifth, 0.5);
    EXPECT_LE(a.ninetyFifth, 1);
    EXPECT_THROW(impliedSelfAgreement(Matrix(1, 1), prior, 1), std::invalid_argument);
}

} // namespace
} // namespace whichway
