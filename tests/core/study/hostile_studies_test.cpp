// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/random.h"
#include "core/study/study.h"
#include "core/study/study_folder.h"
#include "core/study/units.h"
#include "tests/support/memory_file_system.h"
#include "tests/support/tiny_study.h"

#include <gmock/gmock.h>

namespace whichway {
namespace {

StudyReading readInMemory(const TinyStudy& study) {
    MemoryFileSystem files;
    for (const auto& [path, content] : study.files)
        files.place("/study/" + path, content);
    return readStudy(files, "/study");
}

/// Replaces, inserts or removes a few bytes, many of them such as mean something to a parser.
void garble(std::string& text, Random& random) {
    constexpr std::string_view kTelling = "\"'[]{}=,.#\n\r\t ;-+eE0123456789naif\\\0\xFF\xC3\xEF";
    for (std::size_t edits = 1 + random.below(4); edits > 0; --edits) {
        const std::size_t at = random.below(text.size() + 1);
        const std::size_t length = std::min(random.below(6), text.size() - at);
        std::string piece;
        for (std::size_t i = random.below(6); i > 0; --i)
            piece += random.below(4) == 0 ? static_cast<char>(random.below(256))
                                          : kTelling[random.below(kTelling.size())];
        if (random.below(20) == 0 && at < text.size())
            text.resize(at);
        else
            text.replace(at, length, piece);
    }
}

TEST(HostileStudies, AreReadWholeOrRefusedWhateverTheBytes) {
    int refused = 0;
    for (std::uint64_t seed = 1; seed <= 3000; ++seed) {
        Random random(seed);
        TinyStudy study;
        auto file = study.files.begin();
        // The three tables more often than one of the motions.
        const char* const kLikely[] = {"study.toml", "features.csv", "library.csv", "trajectories/m1.csv"};
        file = study.files.find(kLikely[random.below(4)]);
        garble(file->second, random);
        SCOPED_TRACE(fmt::format("seed {}, {}", seed, file->first));
        const StudyReading reading = readInMemory(study);
        if (!reading.ok()) {
            ++refused;
            EXPECT_EQ(reading.study.protocol, Protocol{});
            for (const Error& problem : reading.problems) {
                EXPECT_FALSE(problem.code.empty());
                EXPECT_FALSE(problem.message.empty());
                EXPECT_FALSE(problem.place.file.empty());
            }
            continue;
        }
        const FeatureTable& table = reading.study.protocol.table;
        ASSERT_GE(table.motions.size(), 2u);
        EXPECT_EQ(table.standardised.rows, table.motions.size());
        EXPECT_EQ(table.standardised.columns, reading.study.protocol.features.size());
        for (const double z : table.standardised.values)
            EXPECT_TRUE(std::isfinite(z));
        for (const std::string& name : table.motions)
            EXPECT_NE(reading.study.motion(name), nullptr);
    }
    EXPECT_GT(refused, 1500);
    EXPECT_LT(refused, 3000);
}

TEST(HostileStudies, EveryBeginningOfAStudyFileIsRefusedOrSound) {
    const TinyStudy sound;
    const std::string& whole = sound.files.at("study.toml");
    for (std::size_t length = 0; length < whole.size(); ++length) {
        TinyStudy study;
        study.files["study.toml"] = whole.substr(0, length);
        // The last line break may go: nothing is lost with it, and all after "c2 is closed by its quote.
        EXPECT_EQ(readInMemory(study).ok(), length == whole.size() - 1) << length;
    }
}

TEST(HostileStudies, MayNotHaveTooManyMotionsOrBytes) {
    TinyStudy study;
    MemoryFileSystem files;
    for (const auto& [path, content] : study.files)
        files.place("/study/" + path, content);
    FolderLimits limits;
    limits.motions = 9;
    std::vector<Error> problems;
    EXPECT_TRUE(StudyFolder(files, "/study", limits).motionNames(problems).empty());
    ASSERT_EQ(problems.size(), 1u);
    EXPECT_EQ(problems.front().code, "study.too-many-motions");

    limits.folderBytes = study.files["features.csv"].size() + 10;
    StudyFolder folder(files, "/study", limits);
    EXPECT_TRUE(folder.read("features.csv").ok());
    EXPECT_EQ(folder.read("library.csv").error().code, "study.too-large");

    limits.fileBytes = 10;
    EXPECT_EQ(StudyFolder(files, "/study", limits).read("features.csv").error().code, "file.too-large");
}

TEST(Units, AreSiSymbolsWithPowersProductsAndOneQuotient) {
    for (const char* unit :
         {"1", "s", "m", "m/s", "m/s2", "m/s3", "1/m", "rad", "N*m", "kg*m2/s", "%", "dB", "kHz"})
        EXPECT_TRUE(isUnit(unit)) << unit;
    for (const char* unit :
         {"", "metres", "m/", "/s", "m/s/s", "m1", "2", "m//s", "m*", "M", " m", "m ", "1*m"})
        EXPECT_FALSE(isUnit(unit)) << unit;
}

} // namespace
} // namespace whichway
