// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/scene_file.h"

#include <gmock/gmock.h>

namespace whichway {
namespace {

using testing::ElementsAre;
using testing::HasSubstr;
using testing::IsEmpty;

const std::string kWhole = R"(name = "ward"
bounds = [0, 0, 16, 9]
floor = [[0, 3, 16, 2.8]]
walls = [[0, 3, 2, 3]]
doors = [[2, 3, 1, 0, 1.5]]
furniture = [[1, 0.5, 1, 2]]
goal = [15, 4.4]
robot = { length = 1.0, width = 0.6, radius = 0.55 }
person_radius = 0.25
keep_right_axis = 4.4
)";

std::string changed(const std::string& from, const std::string& to) {
    std::string text = kWhole;
    text.replace(text.find(from), from.size(), to);
    return text;
}

/// "CODE LINE" of each problem.
std::vector<std::string> problemsOf(const std::string& content) {
    std::vector<std::string> told;
    for (const Error& problem : parseScene(content, "s.toml").problems)
        told.push_back(problem.code + " " + std::to_string(problem.place.line));
    return told;
}

TEST(ParseScene, ReadsAllThatAScenePlaces) {
    const SceneReading reading = parseScene(kWhole, "s.toml");
    EXPECT_THAT(reading.problems, IsEmpty());
    const Scene expected = {.name = "ward",
                            .bounds = {0, 0, 16, 9},
                            .floor = {{0, 3, 16, 2.8}},
                            .walls = {{0, 3, 2, 3}},
                            .doors = {{2, 3, 1, 0, 1.5}},
                            .furniture = {{1, 0.5, 1, 2}},
                            .goal = {15, 4.4},
                            .robotLength = 1,
                            .robotWidth = 0.6,
                            .robotRadius = 0.55,
                            .personRadius = 0.25,
                            .keepRightAxis = 4.4};
    EXPECT_EQ(reading.scene, expected);
}

TEST(ParseScene, NeedsOnlyANameBoundsRobotAndPerson) {
    const SceneReading reading = parseScene(
        "name = \"a\"\nbounds = [0,0,1,1]\nrobot = {length=1,width=1,radius=1}\nperson_radius=0.2\n", "s");
    EXPECT_THAT(reading.problems, IsEmpty());
    EXPECT_THAT(reading.scene.goal, IsEmpty());
}

TEST(ParseScene, NamesTheNearestOfAnUnknownKey) {
    const SceneReading reading = parseScene(changed("walls", "wals"), "s.toml");
    ASSERT_EQ(reading.problems.size(), 1u);
    EXPECT_EQ(reading.problems[0].code, "toml.unknown-key");
    EXPECT_EQ(reading.problems[0].place, (Place{"s.toml", 4, 1}));
    EXPECT_THAT(describe(reading.problems[0]), HasSubstr("walls"));
}

TEST(ParseScene, RefusesWhatCannotBe) {
    EXPECT_THAT(problemsOf(changed("\"ward\"", "\"../ward\"")), ElementsAre("scene.name 1"));
    EXPECT_THAT(problemsOf(changed("\"ward\"", "\"\"")), ElementsAre("scene.name 1"));
    EXPECT_THAT(problemsOf(changed("16, 9]", "16, 0]")), ElementsAre("scene.range 2"));
    EXPECT_THAT(problemsOf(changed("16, 2.8", "-16, 2.8")), ElementsAre("scene.range 3"));
    EXPECT_THAT(problemsOf(changed("0, 3, 2, 3", "0, 3, 20000, 3")), ElementsAre("scene.range 4"));
    EXPECT_THAT(problemsOf(changed("2, 3, 1, 0, 1.5", "2, 3, 0, 0, 1.5")), ElementsAre("scene.range 5"));
    EXPECT_THAT(problemsOf(changed("length = 1.0", "length = 100")), ElementsAre("scene.range 8"));
    EXPECT_THAT(problemsOf(changed("= 0.25", "= -0.25")), ElementsAre("scene.range 9"));
}

TEST(ParseScene, RefusesWhatIsNoListOfThatManyNumbers) {
    EXPECT_THAT(problemsOf(changed("[15, 4.4]", "[15]")), testing::SizeIs(1));
    EXPECT_THAT(problemsOf(changed("[[0, 3, 2, 3]]", "[[0, 3, 2]]")), testing::SizeIs(1));
    EXPECT_THAT(problemsOf(changed("[[0, 3, 2, 3]]", "[0, 3, 2, 3]")), testing::Not(IsEmpty()));
    EXPECT_THAT(problemsOf(changed("4.4]", "nan]")), testing::SizeIs(1));
    EXPECT_THAT(problemsOf(changed("= 0.25", "= \"0.25\"")), testing::SizeIs(1));
}

TEST(ParseScene, NamesAllThatIsWrongAtOnce) {
    EXPECT_THAT(problemsOf("robott = 1\n"), testing::SizeIs(testing::Ge(4u)));
    EXPECT_THAT(problemsOf(changed("goal", "gaol") + "colour = \"red\"\n"), testing::SizeIs(2));
}

TEST(ParseScene, CapsTheNumberOfThings) {
    std::string walls = "[0,0,1,1]";
    for (int i = 0; i < 2000; ++i)
        walls += ",[0,0,1,1]";
    EXPECT_THAT(problemsOf(changed("[[0, 3, 2, 3]]", "[" + walls + "]")), ElementsAre("scene.too-many 4"));
}

} // namespace
} // namespace whichway
