// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/core/study/spoiled_study.h"

#include <gmock/gmock.h>

namespace whichway {
namespace {

using namespace spoiled;

TEST(StudyReading, ReadsTheSoundStudyThatTheOthersSpoil) {
    const StudyReading reading = readBack(TinyStudy(), "sound");
    ASSERT_TRUE(reading.ok()) << codesAndPlaces(reading.problems);
    const Protocol& protocol = reading.study.protocol;
    EXPECT_EQ(protocol.name, "tiny");
    EXPECT_TRUE(protocol.invented);
    EXPECT_EQ(protocol.levels, 2);
    EXPECT_EQ(protocol.texts.at(0).confidence, (std::vector<std::string>{"A little", "Very"}));
    EXPECT_THAT(protocol.table.motions, testing::ElementsAre("m1", "m2", "m3", "m4", "m5", "m6"));
    // The durations of 5 to 10 samples, two a second; the efforts as given.
    for (std::size_t i = 0; i < 6; ++i)
        EXPECT_DOUBLE_EQ(protocol.table.raw(i, 0), 2 + 0.5 * static_cast<double>(i));
    EXPECT_EQ(protocol.table.raw(4, 1), 40);
    EXPECT_EQ(protocol.features.at(1).scale, FeatureScale::Log);
    EXPECT_EQ(protocol.planning.batch, 2);
    EXPECT_EQ(protocol.trials.breakAfter, 3);
    ASSERT_EQ(reading.study.motions.size(), 10u);
    EXPECT_EQ(reading.study.motions[6].name, "c1");
    ASSERT_NE(reading.study.motion("p2"), nullptr);
    EXPECT_EQ(reading.study.motion("p2")->time.size(), 12u);
    EXPECT_EQ(reading.study.motion("m7"), nullptr);
    EXPECT_EQ(protocol.hash.size(), 64u);
}

/// A person stands at (0, 2); the motions go straight along x, m1 the farthest.
TinyStudy studyWithAPerson() {
    TinyStudy study;
    toml("unit = \"s\"\nmeasure = \"travel time\"",
         "unit = \"m\"\nmeasure = \"closest distance to a person\"\nsettings = { person_radius = 0.5 }")(
        study);
    toml("invented = true", "scenes = [\"scenes/room.toml\"]")(study);
    study.files["scenes/room.toml"] =
        "name = \"room\"\nbounds = [0, 0, 4, 3]\n"
        "robot = { length = 0.5, width = 0.4, radius = 0.3 }\nperson_radius = 0.25\n";
    for (int i = 1; i <= 6; ++i)
        study.files[fmt::format("trajectories/m{}.csv", i)] =
            fmt::format("time_s,x_m,y_m,person1_x_m,person1_y_m\n0,0,{0},0,2\n1,1,{0},0,2\n", 0.1 * i);
    return study;
}

TEST(StudyReading, MeasuresInTheSceneAndWithTheSettingsOfTheStudy) {
    const StudyReading reading = readBack(studyWithAPerson(), "person");
    ASSERT_TRUE(reading.ok()) << codesAndPlaces(reading.problems);
    const Study& study = reading.study;
    // The robot's radius is the scene's, the person's the setting's.
    for (std::size_t i = 0; i < 6; ++i)
        EXPECT_NEAR(study.protocol.table.raw(i, 0), 2 - 0.1 * static_cast<double>(i + 1) - 0.3 - 0.5, 1e-12);
    ASSERT_NE(study.sceneOf(study.motions.front()), nullptr);
    EXPECT_EQ(study.sceneOf(study.motions.front())->robotRadius, 0.3);
    EXPECT_EQ(study.motions.back().scene, "room");

    TinyStudy other = studyWithAPerson();
    other.files["scenes/room.toml"] += "# another remark\n";
    EXPECT_NE(readBack(other, "person_hash").study.protocol.hash, study.protocol.hash);
}

TEST(StudyReading, ReportsEveryMotionThatAMeasureIsNotDefinedFor) {
    TinyStudy study = studyWithAPerson();
    study.files["trajectories/m2.csv"] = study.files["trajectories/m5.csv"] = TinyStudy::trajectory(4);
    const StudyReading reading = readBack(study, "nobody_there");
    ASSERT_EQ(reading.problems.size(), 2u) << codesAndPlaces(reading.problems);
    for (const Error& problem : reading.problems)
        EXPECT_EQ(problem.code, "measure.undefined");
    EXPECT_EQ(reading.problems[0].place.file, "trajectories/m2.csv");
    EXPECT_EQ(reading.problems[1].place.file, "trajectories/m5.csv");
}

TEST(StudyReading, DoesNotBlameTheTablesForScenesThatCouldNotBeRead) {
    for (const auto& spoil : {toml("levels = 2", "levels = "), toml("scenes/room.toml", "../room.toml"),
                              toml("scenes/room.toml", "scenes/hall.toml")}) {
        TinyStudy study = studyWithAPerson();
        std::string rows = "trajectory,role,scene\n";
        for (const char* name : {"c1", "c2", "m1", "m2", "m3", "m4", "m5", "m6", "p1", "p2"})
            rows += fmt::format("{},{},room\n", name,
                                *name == 'm'   ? "main"
                                : *name == 'c' ? "catch"
                                               : "practice");
        study.files["library.csv"] = rows;
        ASSERT_TRUE(readBack(study, "scenes_sound").ok());
        spoil(study);
        const StudyReading reading = readBack(study, "scenes_unread");
        EXPECT_EQ(reading.problems.size(), 1u) << codesAndPlaces(reading.problems);
    }
}

TEST(StudyReading, SaysWhenThereIsNoFolder) {
    const StudyReading reading = readStudy(RealFileSystem(), "/nowhere/at/all");
    ASSERT_EQ(reading.problems.size(), 1u);
    EXPECT_EQ(reading.problems.front().code, "study.no-folder");
}

TEST(StudyReading, AcceptsByteOrderMarksAndCarriageReturns) {
    TinyStudy study;
    for (auto& [path, content] : study.files) {
        std::string text = "\xEF\xBB\xBF";
        for (const char c : content)
            text += c == '\n' ? std::string("\r\n") : std::string(1, c);
        content = text;
    }
    StudyReading reading = readBack(study, "windows_text");
    ASSERT_TRUE(reading.ok()) << codesAndPlaces(reading.problems);
    Protocol plain = readBack(TinyStudy(), "unix_text").study.protocol;
    EXPECT_NE(reading.study.protocol.hash, plain.hash);
    plain.hash = reading.study.protocol.hash;
    EXPECT_EQ(reading.study.protocol, plain);
}

TEST(StudyReading, TakesEveryMotionAsMainWithoutALibraryFile) {
    TinyStudy study;
    study.files.erase("library.csv");
    study.files["features.csv"] += "c1,1\nc2,2\np1,3\np2,4\n";
    const StudyReading reading = readBack(study, "no_library_file");
    ASSERT_TRUE(reading.ok()) << codesAndPlaces(reading.problems);
    EXPECT_EQ(reading.study.protocol.table.motions.size(), 10u);
}

TEST(StudyReading, TakesAnotherFeatureTableInPlaceOfItsOwn) {
    TinyStudy study;
    study.files["other.csv"] = "trajectory,effort\nm1,1\nm2,2\nm3,3\nm4,4\nm5,5\nm6,6\n";
    const StudyReading other = readBack(study, "other_features", "other.csv");
    ASSERT_TRUE(other.ok()) << codesAndPlaces(other.problems);
    EXPECT_EQ(other.study.protocol.table.raw(5, 1), 6);
    // It counts as features.csv does: the same bytes there are the same protocol.
    study.files["features.csv"] = study.files["other.csv"];
    EXPECT_EQ(readBack(study, "same_features").study.protocol.hash, other.study.protocol.hash);

    study.files["other.csv"] = "trajectory,effort\nm1,x\n";
    const StudyReading broken = readBack(study, "broken_features", "other.csv");
    ASSERT_FALSE(broken.ok());
    EXPECT_TRUE(broken.problems.back().place.file.ends_with("other.csv"));
}

TEST(StudyReading, ReportsAllFaultsAtOnceInTheOrderOfFilesAndLines) {
    TinyStudy study;
    toml("\"rolling\"", "\"rollign\"")(study);
    toml("levels = 2", "levels = 3")(study);
    toml("\"c1\"", "\"c9\"")(study);
    library("m2,main", "m2,mian")(study);
    features("3.5", "nan")(study);
    features("m4,0.5", "m4,")(study);
    motion("1.5,", "0.5,")(study);
    const StudyReading reading = readBack(study, "many_faults");
    std::vector<std::string> places;
    for (const Error& problem : reading.problems)
        places.push_back(placeInWords(problem.place));
    EXPECT_THAT(places, testing::ElementsAre("study.toml:18:14", "study.toml:41:12", "study.toml:61:10",
                                             "library.csv:3:4", "features.csv:3:4", "features.csv:5:4",
                                             "trajectories/m1.csv:5:1"))
        << codesAndPlaces(reading.problems);
    EXPECT_EQ(reading.study.protocol, Protocol{});
}

TEST(StudyReading, NamesTheNearestKeyMeasureAndMotion) {
    for (const auto& [spoil, nearest] : std::vector<std::pair<std::function<void(TinyStudy&)>, std::string>>{
             {toml("invented = true", "invnted = true"), "“invented”"},
             {toml("\"travel time\"", "\"travl time\""), "“travel time”"},
             {toml("left = \"p1\"", "left = \"p11\""), "“p1”"},
             {toml("numeraire = \"duration\"", "numeraire = \"duratoin\""), "“duration”"}}) {
        TinyStudy study;
        spoil(study);
        const StudyReading reading = readBack(study, "nearest");
        ASSERT_FALSE(reading.ok());
        EXPECT_THAT(reading.problems.front().remedy, testing::HasSubstr("Did you mean " + nearest));
    }
}

TEST(StudyReading, StopsListingAfterSoManyProblems) {
    TinyStudy study;
    for (int i = 0; i < 3000; ++i)
        study.files["library.csv"] += fmt::format("x{},main\n", i);
    const StudyReading reading = readBack(study, "flood");
    EXPECT_LE(reading.problems.size(), 501u);
    EXPECT_EQ(reading.problems.back().code, "study.more-problems");
}

TEST(ProtocolHash, ChangesWithEveryFileThatAnAnswerDependsOn) {
    const std::string plain = readBack(TinyStudy(), "hash").study.protocol.hash;
    EXPECT_EQ(readBack(TinyStudy(), "hash_again").study.protocol.hash, plain);
    for (const auto& spoil : std::vector<std::function<void(TinyStudy&)>>{
             toml("\"Thank you.\"", "\"Thanks.\""), features("m1,12.5", "m1,12.6"),
             library("c2,catch\n", "c2,main\n"), in("trajectories/p1.csv", "0.5,0.25,0,0", "0.5,0.26,0,0")}) {
        TinyStudy study;
        spoil(study);
        if (study.files["library.csv"].find("c2,main") != std::string::npos)
            study.files["features.csv"] += "c2,9\n";
        const StudyReading reading = readBack(study, "hash_changed");
        ASSERT_TRUE(reading.ok()) << codesAndPlaces(reading.problems);
        EXPECT_NE(reading.study.protocol.hash, plain);
    }
}

} // namespace
} // namespace whichway
