// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/file_system.h"
#include "core/study/feature_summary.h"
#include "core/study/library_check.h"
#include "core/study/study.h"
#include "tests/support/window_passes.h"

#include <fstream>
#include <gmock/gmock.h>
#include <iterator>

namespace whichway {
namespace {

const std::string kSamples = std::string(WHICHWAY_SOURCE_DIR) + "/sample_studies/";

std::string contentOf(const std::string& path) {
    std::ifstream file(path, std::ios::binary);
    return {std::istreambuf_iterator<char>(file), {}};
}

std::string describeAll(const std::vector<Error>& problems) {
    std::string text;
    for (const Error& problem : problems)
        text += describe(problem) + "\n";
    return text;
}

std::vector<std::string> warningsOf(const Study& study) {
    std::vector<std::string> codes;
    for (const LibraryFinding& finding : checkLibrary(study, summarise(study.protocol.table)))
        if (finding.weight == LibraryFinding::Weight::Warning)
            codes.push_back(finding.message);
    return codes;
}

TEST(GivenFeaturesSample, IsReadWithoutASceneAndWithoutWarnings) {
    const StudyReading reading = readStudy(RealFileSystem(), kSamples + "given_features");
    ASSERT_TRUE(reading.ok()) << describeAll(reading.problems);
    const Study& study = reading.study;
    EXPECT_TRUE(study.protocol.invented);
    EXPECT_EQ(study.protocol.table.motions.size(), 40u);
    EXPECT_EQ(study.motions.size(), 46u);
    EXPECT_EQ(study.protocol.features.size(), 5u);
    for (const Trajectory& motion : study.motions) {
        EXPECT_EQ(study.sceneOf(motion), nullptr);
        EXPECT_LE(motion.duration(), 10);
    }
    EXPECT_THAT(warningsOf(study), testing::IsEmpty());
}

TEST(GivenFeaturesSample, IsWhatItsRecipeMakes) {
    for (const auto& [path, content] : windowPassFiles())
        EXPECT_TRUE(contentOf(kSamples + "given_features/" + path) == content) << path;
}

TEST(WardCartSample, IsReadMeasuredAndWithoutWarnings) {
    const StudyReading reading = readStudy(RealFileSystem(), kSamples + "ward_cart");
    ASSERT_TRUE(reading.ok()) << describeAll(reading.problems);
    const Study& study = reading.study;
    EXPECT_TRUE(study.protocol.invented);
    EXPECT_GE(study.protocol.table.motions.size(), 240u);
    for (const FeatureDefinition& feature : study.protocol.features)
        EXPECT_FALSE(feature.measure.empty()) << feature.name;
    for (const Trajectory& motion : study.motions) {
        EXPECT_NE(study.sceneOf(motion), nullptr) << motion.name;
        EXPECT_LE(motion.duration(), 10 + 1e-9) << motion.name;
    }
    EXPECT_THAT(warningsOf(study), testing::IsEmpty());
}

} // namespace
} // namespace whichway
