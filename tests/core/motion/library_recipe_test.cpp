// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/library_recipe.h"

#include "tests/core/motion/small_recipe.h"

#include <gmock/gmock.h>

namespace whichway {
namespace {

using motions::changed;
using motions::kSmallRecipe;
using testing::ElementsAre;
using testing::IsEmpty;

std::vector<std::string> problemsOf(const std::string& from, const std::string& to) {
    std::vector<std::string> told;
    for (const Error& problem : parseRecipe(changed(kSmallRecipe, from, to), "r.toml").problems)
        told.push_back(problem.code + " " + std::to_string(problem.place.line));
    return told;
}

TEST(ParseRecipe, ReadsEveryKey) {
    const RecipeReading reading = parseRecipe(kSmallRecipe, "r.toml");
    ASSERT_THAT(reading.problems, IsEmpty());
    const LibraryRecipe& recipe = reading.recipe;
    EXPECT_EQ(recipe.scenePath, "scenes/hall.toml");
    EXPECT_EQ(recipe.seed, 5u);
    EXPECT_EQ(recipe.rate, 10);
    EXPECT_EQ(recipe.mostSeconds, 8);
    EXPECT_EQ(recipe.decimals, 4);
    EXPECT_EQ(recipe.startX, 1);
    EXPECT_EQ(recipe.startY, 2);
    EXPECT_EQ(recipe.base.turnAcceleration, 4);
    ASSERT_EQ(recipe.people.size(), 1u);
    EXPECT_THAT(recipe.people[0], ElementsAre(ElementsAre(0, 4, 3.2), ElementsAre(10, 3, 3.2)));
    ASSERT_EQ(recipe.manners.size(), 2u);
    EXPECT_EQ(recipe.manners[0].role, "main");
    EXPECT_EQ(recipe.manners[0].side.low, -0.3);
    EXPECT_EQ(recipe.manners[0].side.high, 0.5);
    EXPECT_EQ(recipe.manners[1].role, "practice");
    EXPECT_EQ(recipe.manners[1].prefix, "p");
    EXPECT_EQ(recipe.manners[1].wait.high, 1);
}

TEST(ParseRecipe, RefusesWhatCannotBe) {
    EXPECT_THAT(problemsOf("format = 1", "format = 2"), ElementsAre("recipe.format 1"));
    EXPECT_THAT(problemsOf("scenes/hall", "../hall"), ElementsAre("recipe.path 3"));
    EXPECT_THAT(problemsOf("scenes/hall", "/hall"), ElementsAre("recipe.path 3"));
    EXPECT_THAT(problemsOf("rate_hz = 10", "rate_hz = 1"), ElementsAre("recipe.range 5"));
    EXPECT_THAT(problemsOf("most_seconds = 8", "most_seconds = 1e9"), ElementsAre("recipe.range 6"));
    EXPECT_THAT(problemsOf("decimals = 4", "decimals = 20"), ElementsAre("recipe.range 7"));
    EXPECT_THAT(problemsOf("acceleration = 2", "acceleration = 0"), ElementsAre("recipe.range 12"));
    EXPECT_THAT(problemsOf("[10, 3, 3.2]", "[0, 3, 3.2]"), ElementsAre("recipe.range 17"));
    EXPECT_THAT(problemsOf("count = 5", "count = 0"), ElementsAre("recipe.range 21"));
    EXPECT_THAT(problemsOf("count = 5", "count = 5000"), ElementsAre("recipe.too-many 19"));
    EXPECT_THAT(problemsOf("[1.0, 2.0]", "[2.0, 1.0]"), ElementsAre("recipe.range 22"));
    EXPECT_THAT(problemsOf("[1.0, 2.0]", "[0, 1.0]"), ElementsAre("recipe.range 22"));
    EXPECT_THAT(problemsOf("[0.1, 0.5]", "[-0.1, 0.5]"), ElementsAre("recipe.range 23"));
    EXPECT_THAT(problemsOf("side = [-0.3, 0.5]", "foresight = [0, 0.5]"), ElementsAre("recipe.range 24"));
    EXPECT_THAT(problemsOf("side = [-0.3, 0.5]", "slowing = [0, 1.5]"), ElementsAre("recipe.range 24"));
    EXPECT_THAT(problemsOf("\"practice\"\nprefix", "\"main course\"\nprefix"), ElementsAre("recipe.role 28"));
    EXPECT_THAT(problemsOf("\"p\"", "\"../p\""), ElementsAre("recipe.range 29"));
    EXPECT_THAT(problemsOf("cruise = [1.0", "cruse = [1.0"),
                ElementsAre("toml.missing-key 19", "toml.unknown-key 22"));
}

TEST(ParseRecipe, NamesAllThatIsMissing) {
    EXPECT_THAT(parseRecipe("", "r.toml").problems, testing::SizeIs(testing::Ge(5u)));
}

} // namespace
} // namespace whichway
