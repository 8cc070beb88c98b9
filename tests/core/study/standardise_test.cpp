// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/feature_summary.h"
#include "core/study/standardise.h"
#include "tests/core/study/reference_table.h"

#include <gmock/gmock.h>
#include <limits>

namespace whichway {
namespace {

using Kind = StandardisationFault::Kind;

StandardisedTable referenceTable() {
    const auto features = reference::features();
    return standardise(reference::motions(8), reference::matrixOf(reference::kRaw), features);
}

StandardisedTable oneFeature(const std::vector<double>& values, FeatureScale scale) {
    Matrix raw(values.size(), 1);
    raw.values = values;
    FeatureDefinition feature;
    feature.name = "f";
    feature.scale = scale;
    return standardise(reference::motions(values.size()), raw, std::vector<FeatureDefinition>{feature});
}

TEST(Standardise, AgreesWithNumpyForEveryScale) {
    const StandardisedTable result = referenceTable();
    ASSERT_TRUE(result.faults.empty());
    for (std::size_t j = 0; j < 4; ++j) {
        EXPECT_NEAR(result.table.standardisation[j].mean, reference::kMean[j], 1e-14);
        EXPECT_NEAR(result.table.standardisation[j].deviation, reference::kDeviation[j], 1e-14);
        for (std::size_t i = 0; i < 8; ++i) {
            EXPECT_NEAR(result.table.standardised(i, j), reference::kStandardised[i][j], 1e-13);
            EXPECT_EQ(result.table.raw(i, j), reference::kRaw[i][j]);
        }
    }
    EXPECT_NEAR(result.table.standardisation[2].low, reference::kLowCap, 1e-15);
    EXPECT_NEAR(result.table.standardisation[2].high, reference::kHighCap, 1e-15);
    EXPECT_EQ(result.table.motions, reference::motions(8));
}

TEST(Standardise, TreatsOneMoreMotionAsItTreatedTheTable) {
    const StandardisedTable result = referenceTable();
    const auto features = reference::features();
    for (std::size_t i = 0; i < 8; ++i)
        for (std::size_t j = 0; j < 4; ++j)
            EXPECT_EQ(
                standardisedValue(reference::kRaw[i][j], features[j].scale, result.table.standardisation[j]),
                result.table.standardised(i, j));
    EXPECT_THROW(standardisedValue(0, FeatureScale::Log, result.table.standardisation[3]),
                 std::invalid_argument);
}

TEST(Standardise, NamesEveryValueThatHasNoLogarithm) {
    const StandardisedTable result = oneFeature({1, 0, 2, -3}, FeatureScale::Log);
    EXPECT_THAT(result.faults, testing::ElementsAre(StandardisationFault{Kind::NotPositive, 0, 1, 0},
                                                    StandardisationFault{Kind::NotPositive, 0, 3, -3}));
    EXPECT_EQ(result.table, FeatureTable{});
}

TEST(Standardise, RefusesAFeatureThatVariesByRoundingOnly) {
    EXPECT_THAT(oneFeature({0.3, 0.1 + 0.2, 0.3}, FeatureScale::Plain).faults,
                testing::ElementsAre(StandardisationFault{Kind::Constant, 0, 0, 0.3}));
    EXPECT_THAT(oneFeature({0, 0, 0}, FeatureScale::Plain).faults,
                testing::ElementsAre(StandardisationFault{Kind::Constant, 0, 0, 0}));
    EXPECT_TRUE(oneFeature({0.3, 0.3000001}, FeatureScale::Plain).faults.empty());
}

TEST(Standardise, RefusesAFeatureThatIsConstantOnceCapped) {
    std::vector<double> values(40, 2.0);
    values.back() = 9.0;
    EXPECT_THAT(oneFeature(values, FeatureScale::Capped).faults,
                testing::ElementsAre(StandardisationFault{Kind::ConstantWhenCapped, 0, 0, 2.0}));
    EXPECT_TRUE(oneFeature(values, FeatureScale::Plain).faults.empty());
}

TEST(Standardise, NeedsTwoMotions) {
    EXPECT_THAT(oneFeature({1}, FeatureScale::Plain).faults,
                testing::ElementsAre(StandardisationFault{Kind::OneMotion, 0, 0, 0}));
}

TEST(Standardise, KeepsMeanZeroAndDeviationOneForHugeAndTinyValues) {
    for (const double scale : {1e-200, 1.0, 1e200}) {
        const StandardisedTable result = oneFeature({1 * scale, 2 * scale, 4 * scale}, FeatureScale::Plain);
        ASSERT_TRUE(result.faults.empty());
        double sum = 0, squares = 0;
        for (const double z : result.table.standardised.values) {
            sum += z;
            squares += z * z;
        }
        EXPECT_NEAR(sum, 0, 1e-14) << scale;
        EXPECT_NEAR(squares, 3, 1e-14) << scale;
    }
}

TEST(Standardise, ThrowsOnACallersBug) {
    EXPECT_THROW(oneFeature({1, std::numeric_limits<double>::quiet_NaN()}, FeatureScale::Plain),
                 std::invalid_argument);
    const auto features = reference::features();
    EXPECT_THROW((void)standardise(reference::motions(8), Matrix(8, 3), features), std::invalid_argument);
    EXPECT_THROW(quantileOfSorted({}, 0.5), std::invalid_argument);
}

TEST(FeatureSummary, AgreesWithNumpyAndScipy) {
    const FeatureSummary summary = summarise(referenceTable().table);
    for (std::size_t j = 0; j < 4; ++j) {
        const FeatureSpread& spread = summary.features[j];
        EXPECT_NEAR(spread.median, reference::kMedian[j], 1e-14);
        EXPECT_NEAR(spread.mean, reference::kRawMean[j], 1e-13);
        EXPECT_NEAR(spread.deviation, reference::kRawDeviation[j], 1e-12);
        EXPECT_NEAR(spread.skewness, reference::kSkewness[j], 1e-12);
        EXPECT_NEAR(spread.inflation, reference::kInflation[j], 1e-8 * reference::kInflation[j]);
        EXPECT_EQ(spread.mostSharedPart, 1.0 / 8);
        for (std::size_t k = 0; k < 4; ++k)
            EXPECT_NEAR(summary.correlation(j, k), reference::kCorrelation[j][k], 1e-13);
    }
    EXPECT_EQ(summary.features[3].least, 0.5);
    EXPECT_EQ(summary.features[3].greatest, 90);
    EXPECT_NEAR(summary.features[0].lowestZ, reference::kStandardised[0][0], 1e-13);
    EXPECT_NEAR(summary.features[0].highestZ, reference::kStandardised[7][0], 1e-13);
}

TEST(FeatureSummary, CallsTheFactorOfAnExactlyCollinearFeatureInfinite) {
    Matrix raw = reference::matrixOf(reference::kRaw);
    for (std::size_t i = 0; i < raw.rows; ++i)
        raw(i, 3) = 3 * raw(i, 0) - 2 * raw(i, 1); // not of the third
    std::vector<FeatureDefinition> features = reference::features();
    features[2].scale = features[3].scale = FeatureScale::Plain;
    const FeatureSummary summary = summarise(standardise(reference::motions(8), raw, features).table);
    EXPECT_EQ(summary.features[0].inflation, std::numeric_limits<double>::infinity());
    EXPECT_EQ(summary.features[1].inflation, std::numeric_limits<double>::infinity());
    EXPECT_LT(summary.features[2].inflation, 100);
    EXPECT_EQ(summary.features[3].inflation, std::numeric_limits<double>::infinity());
}

} // namespace
} // namespace whichway
