// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/core/study/spoiled_study.h"

#include <gmock/gmock.h>

namespace whichway {
namespace {

using namespace spoiled;

/// One thing that is wrong with a study folder, and what is to be said of it.
struct Fault {
    const char* name = "";
    std::function<void(TinyStudy&)> spoil = {};
    const char* code = "";
    const char* place = ""; ///< FILE:LINE:COLUMN, or FILE where the fault is of the file as a whole
};

const std::string kScene =
    "name = \"room\"\nbounds = [0, 0, 4, 3]\nrobot = { length = 0.5, width = 0.4, radius = 0.3 "
    "}\nperson_radius = 0.25\n";
const std::string kSettings = "measure = \"travel time\"\n";

// trajectories/m1.csv holds the times 0, 0.5, 1, 1.5, 2 in lines 2 to 6.
const Fault kFaults[] = {
    // study.toml as a file
    {"NoStudyFile", erase("study.toml"), "study.missing-file", "study.toml"},
    {"StudyFileNotUtf8", toml("\"Left\"", "\"L\xE9" "ft\""), "toml.encoding", "study.toml:15:10"},
    {"NulInStudyFile", toml("\"Left\"", std::string("\"L\0ft\"", 6)), "toml.syntax", "study.toml:15:10"},
    {"TomlSyntax", toml("levels = 2", "levels = "), "toml.syntax", "study.toml:9:10"},
    {"KeyTwice", toml("levels = 2", "levels = 2\nlevels = 2"), "toml.syntax", "study.toml:10:10"},
    {"BracketsNestedTooDeep", toml("levels = 2", "levels = " + repeated("[", 40)), "toml.nesting", "study.toml:9:26"},
    {"DottedKeyTooDeep", toml("levels = 2", repeated("a.", 200000) + "a = 2"), "toml.nesting", "study.toml:9:32"},
    {"StudyFileIsALink", all({[](TinyStudy& study) {
    study.files["real.toml"] = study.files["study.toml"]; },
                              link("study.toml", "real.toml")}),
     "study.link", "study.toml"},
    {"StudyFileTooLarge", toml("format = 1", "# " + std::string(5 << 20, 'x') + "\nformat = 1"), "file.too-large",
     "study.toml"},

    // study.toml: keys and types
    {"UnknownKey", toml("invented = true", "invnted = true"), "toml.unknown-key", "study.toml:5:1"},
    {"UnknownKeyOfFeature", toml("speak_per = 1", "speak_pr = 1"), "toml.unknown-key", "study.toml:28:1"},
    {"UnknownTable", toml("[model]", "[modle]"), "toml.unknown-key", "study.toml:35:2"},
    {"MissingKey", toml("title = \"A tiny study\"\n", ""), "toml.missing-key", "study.toml:1:1"},
    {"MissingKeyOfTexts", toml("end = \"Thank you.\"\n", ""), "toml.missing-key", "study.toml:12:8"},
    {"MissingTable", toml("[answers]\nlevels = 2\ncannot_tell = true\n", ""), "toml.missing-key", "study.toml:1:1"},
    {"WrongType", toml("levels = 2", "levels = \"2\""), "toml.type", "study.toml:9:10"},
    {"NumberForText", toml("\"J\"", "7"), "toml.type", "study.toml:32:8"},
    {"TableForText", toml("\"A tiny study\"", "{ en = \"A tiny study\" }"), "toml.type", "study.toml:3:9"},

    // study.toml: values
    {"UnknownFormat", toml("format = 1", "format = 2"), "study.format", "study.toml:1:10"},
    {"BadStudyName", toml("\"tiny\"", "\"tiny study\""), "study.name", "study.toml:2:8"},
    {"StudyNameTooLong", toml("\"tiny\"", "\"" + std::string(65, 'a') + "\""), "study.name", "study.toml:2:8"},
    {"BlankText", toml("\"Right\"", "\" \""), "study.text", "study.toml:16:9"},
    {"ControlCharacterInText", toml("\"Right\"", "\"R\\u0007\""), "study.text", "study.toml:16:9"},
    {"EndlessText", toml("\"Right\"", "\"" + std::string(5000, 'R') + "\""), "study.text", "study.toml:16:9"},
    {"BlankPage", toml("\"Then choose.\"", "\"\""), "study.text", "study.toml:14:40"},
    {"NoPages", toml("[\"Watch both motions.\", \"Then choose.\"]", "[]"), "study.text", "study.toml:14:16"},
    {"BadLanguage", toml("[texts.en]", "[texts.e]"), "study.language", "study.toml:12:8"},
    {"MoreLevelsThanWords", toml("levels = 2", "levels = 3"), "study.words", "study.toml:18:14"},
    {"FewerLevelsThanWords", toml("\"A little\", ", "\"A little\", \"Fairly\", "), "study.words", "study.toml:18:14"},
    {"OneWordForTwoLevels", toml("\"A little\"", "\"Very\""), "study.words", "study.toml:18:14"},
    {"WordsWithoutLevels", all({toml("levels = 2\ncannot_tell = true", "levels = 1"),
                                toml("sureness = \"How sure are you?\"\n", "")}),
     "study.words", "study.toml:16:1"},
    {"TooManyLevels", toml("levels = 2", "levels = 8"), "study.range", "study.toml:9:10"},
    {"CannotTellWithoutGrades",
     all({toml("levels = 2", "levels = 1"),
          toml("sureness = \"How sure are you?\"\nconfidence = [\"A little\", \"Very\"]\n", "")}),
     "study.cannot-tell", "study.toml:10:15"},
    {"UnknownNumeraire", toml("numeraire = \"duration\"", "numeraire = \"duratoin\""), "study.numeraire",
     "study.toml:6:13"},
    {"LapseTooLarge", toml("0.05", "0.25"), "study.range", "study.toml:36:9"},
    {"LapseNotANumber", toml("0.05", "nan"), "toml.not-finite", "study.toml:36:9"},
    {"LapseNegative", toml("0.05", "-0.01"), "study.range", "study.toml:36:9"},
    {"UnknownWeightScale", toml("\"hierarchical\"", "\"free\""), "study.choice", "study.toml:37:9"},
    {"UnknownSchedule", toml("\"rolling\"", "\"rollign\""), "study.choice", "study.toml:41:12"},
    {"UnknownWayToChoose", toml("\"jointly informative\"", "\"by taste\""), "study.choice", "study.toml:43:10"},
    {"UnknownWorth", toml("\"information\"", "\"money\""), "study.choice", "study.toml:44:9"},
    {"EmptyBatch", toml("batch = 2", "batch = 0"), "study.range", "study.toml:42:9"},
    {"NegativeCount", toml("held_out = 2", "held_out = -2"), "study.range", "study.toml:49:12"},
    {"FractionOfATrial", toml("main = 4", "main = 4.5"), "toml.type", "study.toml:48:8"},
    {"MoreRepeatsThanHeldOut", toml("repeat = 1", "repeat = 3"), "study.repeats", "study.toml:50:10"},
    {"TooFewPracticePairs", toml("practice = 1", "practice = 2"), "study.too-few-pairs", "study.toml:47:12"},
    {"TooFewCatchPairs", toml("catch = 1", "catch = 2"), "study.too-few-pairs", "study.toml:51:9"},
    {"TooFewMotionsForTheTrials", toml("main = 4", "main = 14"), "study.too-few-motions", "study.toml:48:8"},
    {"OneMotionTwiceInAPair", toml("right = \"p2\"", "right = \"p1\""), "study.same-motion", "study.toml:58:9"},
    {"CatchMotionMissing", toml("\"c1\"", "\"c9\""), "study.unknown-motion", "study.toml:61:10"},
    {"CatchMotionInPractice", toml("\"p1\"", "\"c1\""), "study.wrong-role", "study.toml:57:8"},
    {"UnknownUnit", toml("\"J\"", "\"joule\""), "study.unit", "study.toml:32:8"},
    {"UnitOfAnotherMeasure", toml("unit = \"s\"", "unit = \"ms\""), "study.unit-of-measure", "study.toml:26:8"},
    {"UnknownMeasure", toml("\"travel time\"", "\"travl time\""), "study.unknown-measure", "study.toml:27:11"},
    {"UnknownSetting", toml(kSettings, kSettings + "settings = { reach = 1 }\n"), "study.unknown-setting",
     "study.toml:28:14"},
    {"SettingThatCannotBe", toml("unit = \"s\"\n" + kSettings, "unit = \"m/s3\"\nmeasure = \"roughness\"\nsettings = { window = 0 }\n"),
     "study.setting-range", "study.toml:28:23"},
    {"SettingsWithoutMeasure", toml("scale = \"log\"", "scale = \"log\"\nsettings = { reach = 1 }"),
     "study.unknown-setting", "study.toml:34:14"},
    {"UnknownFeatureScale", toml("\"log\"", "\"logarithmic\""), "study.choice", "study.toml:33:9"},
    {"SpeakPerNothing", toml("speak_per = 1", "speak_per = 0"), "study.speak-per", "study.toml:28:13"},
    {"SpeakPerOfALogarithm", toml("scale = \"log\"", "scale = \"log\"\nspeak_per = 2"), "study.speak-per",
     "study.toml:34:13"},
    {"BadFeatureName",
     toml("[features.effort]",
          "[features.Time]\nlabel = \"Time\"\nunit = \"s\"\nmeasure = \"travel time\"\n\n[features.effort]"),
     "study.name", "study.toml:30:11"},
    {"NoFeatures", all({[](TinyStudy& study) {
    std::string& text = study.files["study.toml"];
    const std::size_t start = text.find("[features.duration]");
    text.replace(start, text.find("[model]") - start, "[features]\n");
                        },
                        erase("features.csv")}),
     "study.no-features", "study.toml:24:2"},

    // Ways out of the folder, links, sizes
    {"PathEscape", toml("invented = true", "scenes = [\"../room.toml\"]"), "study.path", "study.toml:5:11"},
    {"AbsolutePath", toml("invented = true", "scenes = [\"/etc/passwd.toml\"]"), "study.path", "study.toml:5:11"},
    {"SceneMissing", toml("invented = true", "scenes = [\"room.toml\"]"), "study.missing-file", "room.toml"},
    {"SceneThroughALink", all({toml("invented = true", "scenes = [\"scenes/room.toml\"]"), link("scenes", ".")}),
     "study.link", "scenes"},
    {"MotionIsALink", link("trajectories/m1.csv", "m2.csv"), "study.link", "trajectories/m1.csv"},
    {"LinkLoopInTrajectories", link("trajectories/loop", "../trajectories"), "study.link", "trajectories/loop"},
    {"TrajectoriesIsALinkToItself", all({[](TinyStudy& study) {
    std::erase_if(study.files, [](const auto& file) { return file.first.starts_with("trajectories/"); });
                                         },
                                         link("trajectories", "trajectories")}),
     "study.link", "trajectories"},
    {"MotionTooLarge", motion("0,0,0,0\n", "0,0,0,0\n" + std::string(5 << 20, '\n')), "file.too-large",
     "trajectories/m1.csv"},
    {"FolderAmongMotions", write("trajectories/old/m1.csv", "x"), "study.unexpected-file", "trajectories/old"},
    {"OtherFileAmongMotions", write("trajectories/notes.txt", "x"), "study.unexpected-file", "trajectories/notes.txt"},
    {"BadMotionName", write("trajectories/my motion.csv", TinyStudy::trajectory(4)), "study.name",
     "trajectories/my motion.csv"},
    {"NoTrajectories", [](TinyStudy& study) {
    std::erase_if(study.files, [](const auto& file) { return file.first.starts_with("trajectories/"); });
     },
     "study.missing-file", "trajectories"},
    {"EmptyLibrary", [](TinyStudy& study) {
    std::erase_if(study.files, [](const auto& file) { return file.first.starts_with("trajectories/"); });
    study.files["trajectories/.keep"] = "";
     },
     "study.no-motions", "trajectories"},
    {"OneMainMotion", library("m2,main\nm3,main\nm4,main\nm5,main\nm6,main\n",
                              "m2,catch\nm3,catch\nm4,catch\nm5,catch\nm6,catch\n"),
     "study.one-motion", "trajectories"},
    {"NoMainMotion", [](TinyStudy& study) {
    std::string& text = study.files["library.csv"];
    for (std::size_t at; (at = text.find("main")) != std::string::npos;)
        text.replace(at, 4, "catch");
     },
     "study.no-main-motions", "trajectories"},

    // library.csv
    {"MotionListedTwice", library("m2,main\n", "m2,main\nm2,main\n"), "study.duplicate-motion", "library.csv:4:1"},
    {"MotionNotListed", [](TinyStudy& study) {
    study.files["trajectories/m7.csv"] = TinyStudy::trajectory(9); },
     "study.unlisted-motion", "library.csv"},
    {"MotionListedButMissing", library("m2,main\n", "m2,main\nm9,main\n"), "study.unknown-motion", "library.csv:4:1"},
    {"UnknownRole", library("m2,main", "m2,mian"), "study.unknown-role", "library.csv:3:4"},
    {"UnknownScene", all({library("trajectory,role\n", "trajectory,role,scene\n"), library("m1,main\n", "m1,main,hall\n"),
                          [](TinyStudy& study) {
    std::string& text = study.files["library.csv"];
    for (std::size_t at = text.find('\n', text.find("hall")) + 1; at < text.size();) {
        at = text.find('\n', at);
        text.insert(at, ",");
        at += 2;
    }
                          }}),
     "study.unknown-scene", "library.csv:2:9"},
    {"LibraryWithoutRoles", write("library.csv", "trajectory,scene\nm1,\n"), "study.missing-column", "library.csv:1:1"},
    {"UnknownColumnOfLibrary", all({library("trajectory,role\n", "trajectory,role,note\n"), [](TinyStudy& study) {
                                        std::string& text = study.files["library.csv"];
                                        for (std::size_t at = text.find('\n') + 1; at < text.size(); at += 2) {
                                            at = text.find('\n', at);
                                            text.insert(at, ",");
                                        }
                                    }}),
     "study.unknown-column", "library.csv:1:17"},

    // features.csv
    {"NoFeaturesFile", erase("features.csv"), "study.missing-file", "features.csv"},
    {"FeaturesNotUtf8", features("3.5", "\xB3"), "csv.encoding", "features.csv:3:4"},
    {"NulInFeatures", features("3.5", std::string("\0", 1)), "csv.encoding", "features.csv:3:4"},
    {"MissingColumn", all({toml("[features.effort]", "[features.noise]\nlabel = \"Noise\"\nunit = \"dB\"\n\n"
                                                     "[features.effort]")}),
     "study.missing-column", "features.csv:1:1"},
    {"DuplicateColumn", write("features.csv", "trajectory,effort,effort\nm1,1,1\n"), "csv.duplicate-column",
     "features.csv:1:19"},
    {"Semicolons", write("features.csv", "trajectory;effort\nm1;1\n"), "csv.semicolons", "features.csv:1:11"},
    {"DecimalComma", features("m2,3.5", "m2,\"3,5\""), "csv.decimal-comma", "features.csv:3:4"},
    {"DecimalCommaUnquoted", features("m2,3.5", "m2,3,5"), "csv.cells", "features.csv:3:6"},
    {"RowTooShort", features("m2,3.5", "m2"), "csv.cells", "features.csv:3:1"},
    {"NotANumber", features("3.5", "much"), "csv.not-a-number", "features.csv:3:4"},
    {"NaN", features("3.5", "nan"), "csv.not-finite", "features.csv:3:4"},
    {"Infinity", features("3.5", "-inf"), "csv.not-finite", "features.csv:3:4"},
    {"EmptyCell", features("3.5", ""), "csv.missing", "features.csv:3:4"},
    {"QuoteNeverClosed", features("3.5", "\"3.5"), "csv.quote", "features.csv:3:4"},
    {"LogarithmOfZero", features("3.5", "0"), "study.not-positive", "features.csv:3:4"},
    {"LogarithmOfANegative", features("3.5", "-2"), "study.not-positive", "features.csv:3:4"},
    {"FeaturesMissAMotion", features("m2,3.5\n", ""), "study.motion-without-features", "features.csv"},
    {"FeaturesOfAnUnknownMotion", features("m2,3.5\n", "m2,3.5\nm22,1\n"), "study.unknown-motion", "features.csv:4:1"},
    {"FeaturesTwice", features("m2,3.5\n", "m2,3.5\nm2,4\n"), "study.duplicate-motion", "features.csv:4:1"},
    {"MeasuredFeatureGivenToo",
     write("features.csv",
           "trajectory,effort,duration\nm1,1,1\nm2,2,2\nm3,3,3\nm4,4,4\nm5,5,5\nm6,6,6\n"),
     "study.measured-column", "features.csv:1:19"},
    {"ConstantGivenFeature", write("features.csv", "trajectory,effort\nm1,5\nm2,5\nm3,5\nm4,5\nm5,5\nm6,5\n"),
     "study.constant-feature", "study.toml:30:11"},
    {"ConstantMeasuredFeature", [](TinyStudy& study) {
    for (const char* name : {"m1", "m2", "m3", "m4", "m5", "m6"})
        study.files[fmt::format("trajectories/{}.csv", name)] = TinyStudy::trajectory(5);
     },
     "study.constant-feature", "study.toml:24:11"},
    {"ConstantOnceCapped", all({toml("scale = \"log\"", "scale = \"capped\""), [](TinyStudy& study) {
    std::string& text = study.files["features.csv"] = "trajectory,effort\n";
    std::string& roles = study.files["library.csv"];
    for (int i = 1; i <= 30; ++i) {
        const std::string name = fmt::format("m{}", i);
        text += fmt::format("{},{}\n", name, i == 7 ? 9 : 3);
        study.files["trajectories/" + name + ".csv"] = TinyStudy::trajectory(3 + i % 9);
        if (i > 6)
            roles += name + ",main\n";
    }
                                }}),
     "study.constant-feature", "study.toml:30:11"},

    // trajectories/m1.csv
    {"MotionEmptyFile", write("trajectories/m1.csv", ""), "csv.empty", "trajectories/m1.csv:1:1"},
    {"MotionNotUtf8", motion("0.5,0.25,", "0.5,\xFF,"), "csv.encoding", "trajectories/m1.csv:3:5"},
    {"MotionSemicolons", write("trajectories/m1.csv", "time_s;x_m;y_m\n0;0;0\n1;1;1\n"), "csv.semicolons",
     "trajectories/m1.csv:1:7"},
    {"MotionDecimalCommas", motion("0.5,0.25,", "\"0,5\",0.25,"), "csv.decimal-comma", "trajectories/m1.csv:3:1"},
    {"MotionMilliseconds", write("trajectories/m1.csv", "time_s,x_m,y_m\n0,0,0\n500,1,0\n1000,2,0\n"),
     "trajectory.time-looks-like-ms", "trajectories/m1.csv:1:1"},
    {"MotionTimeInMilliseconds", motion("time_s", "time_ms"), "trajectory.unit", "trajectories/m1.csv:1:1"},
    {"MotionCentimetres", motion("x_m", "x_cm"), "trajectory.unit", "trajectories/m1.csv:1:8"},
    {"MotionDegrees", motion("heading_rad", "heading_deg"), "trajectory.unit", "trajectories/m1.csv:1:16"},
    {"MotionFarAway", motion("0.5,0.25,", "0.5,25000,"), "trajectory.too-far", "trajectories/m1.csv:3:5"},
    {"MotionTimeBackward", motion("1.5,0.75,", "0.9,0.75,"), "trajectory.time-backward", "trajectories/m1.csv:5:1"},
    {"MotionTimeRepeats", motion("1.5,0.75,", "1,0.75,"), "trajectory.time-repeats", "trajectories/m1.csv:5:1"},
    {"MotionNaN", motion("0.5,0.25,", "0.5,nan,"), "csv.not-finite", "trajectories/m1.csv:3:5"},
    {"MotionInfinity", motion("0.5,0.25,", "0.5,inf,"), "csv.not-finite", "trajectories/m1.csv:3:5"},
    {"MotionEmptyCell", motion("0.5,0.25,", "0.5,,"), "csv.missing", "trajectories/m1.csv:3:5"},
    {"MotionRowTooShort", motion("0.5,0.25,0,0", "0.5,0.25,0"), "csv.cells", "trajectories/m1.csv:3:10"},
    {"MotionWithoutY", write("trajectories/m1.csv", "time_s,x_m\n0,0\n1,1\n"), "trajectory.missing-column",
     "trajectories/m1.csv:1:1"},
    {"MotionWithAStrangeColumn", motion("heading_rad", "mood_1"), "trajectory.unknown-column",
     "trajectories/m1.csv:1:16"},
    {"MotionColumnTwice", motion("y_m", "x_m"), "csv.duplicate-column", "trajectories/m1.csv:1:12"},
    {"MotionOfOneSample", write("trajectories/m1.csv", "time_s,x_m,y_m\n0,0,0\n"), "trajectory.too-short",
     "trajectories/m1.csv:1:1"},
    {"MotionWithoutTheMeasure",
     all({toml("unit = \"s\"\nmeasure = \"travel time\"", "unit = \"1\"\nmeasure = \"detour\""),
          [](TinyStudy& study) {
    for (int i = 2; i <= 6; ++i) // ways that end elsewhere than they began, each of its own length
        study.files[fmt::format("trajectories/m{}.csv", i)] =
            fmt::format("time_s,x_m,y_m\n0,0,0\n1,1,{}\n2,2,0\n", i);
          },
          write("trajectories/m1.csv", "time_s,x_m,y_m\n0,0,0\n1,1,0\n2,0,0\n")}),
     "measure.undefined", "trajectories/m1.csv"},

    // Scenes
    {"UnknownKeyOfScene", all({toml("invented = true", "scenes = [\"room.toml\"]"),
                               write("room.toml", kScene + "colour = \"blue\"\n")}),
     "toml.unknown-key", "room.toml:5:1"},
    {"SceneSyntax", all({toml("invented = true", "scenes = [\"room.toml\"]"), write("room.toml", "name = \n")}),
     "toml.syntax", "room.toml:1:8"},
    {"SceneNestedTooDeep", all({toml("invented = true", "scenes = [\"room.toml\"]"),
                                write("room.toml", repeated("a.", 200000) + "a = 1\n")}),
     "toml.nesting", "room.toml:1:32"},
    {"TwoScenesOfOneName", all({toml("invented = true", "scenes = [\"a.toml\", \"b.toml\"]"),
                                write("a.toml", kScene), write("b.toml", kScene), [](TinyStudy& study) {
    std::string& text = study.files["library.csv"];
    for (std::size_t at = 0; at < text.size(); at += 2) {
        const std::string cell = at == 0 ? ",scene" : ",room";
        at = text.find('\n', at);
        text.insert(at, cell);
        at += cell.size() - 1;
    }
                                }}),
     "study.duplicate-scene", "b.toml"},
    {"ScenesWithoutALibrary",
     all({toml("invented = true", "scenes = [\"a.toml\", \"b.toml\"]"), write("a.toml", kScene),
          write("b.toml", "name = \"hall\"\n" + kScene.substr(kScene.find("bounds"))), erase("library.csv"),
          features("m6,7\n", "m6,7\nc1,1\nc2,2\np1,3\np2,4\n")}),
     "study.scenes-without-library", "study.toml:5:10"},
};

class BrokenStudy : public testing::TestWithParam<Fault> {};

TEST_P(BrokenStudy, IsRefusedWithTheOneReasonAndItsPlace) {
    const Fault& fault = GetParam();
    TinyStudy study;
    fault.spoil(study);
    const StudyReading reading = readBack(study, fault.name);
    ASSERT_EQ(reading.problems.size(), 1u) << codesAndPlaces(reading.problems);
    const Error& problem = reading.problems.front();
    EXPECT_EQ(problem.code, fault.code) << codesAndPlaces(reading.problems);
    EXPECT_EQ(placeInWords(problem.place), fault.place) << codesAndPlaces(reading.problems);
    EXPECT_FALSE(problem.message.empty());
    EXPECT_FALSE(problem.remedy.empty());
    EXPECT_LT(problem.message.size(), 1000u);
    EXPECT_EQ(reading.study.protocol, Protocol{});
    EXPECT_TRUE(reading.study.motions.empty());
}

INSTANTIATE_TEST_SUITE_P(OneFaultEach, BrokenStudy, testing::ValuesIn(kFaults),
                         [](const auto& row) { return std::string(row.param.name); });

} // namespace
} // namespace whichway
