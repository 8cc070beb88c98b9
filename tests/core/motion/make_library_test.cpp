// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/library_recipe.h"
#include "core/motion/scene_file.h"
#include "tests/core/motion/small_recipe.h"

#include <cmath>
#include <gmock/gmock.h>

namespace whichway {
namespace {

using motions::changed;
using motions::kHall;
using motions::kSmallRecipe;

Result<std::vector<MadeMotion>> made(const std::string& recipe = kSmallRecipe,
                                     const std::string& scene = kHall, std::stop_token stop = {}) {
    const RecipeReading reading = parseRecipe(recipe, "r.toml");
    const SceneReading hall = parseScene(scene, "hall.toml");
    EXPECT_THAT(reading.problems, testing::IsEmpty());
    EXPECT_THAT(hall.problems, testing::IsEmpty());
    return makeLibrary(reading.recipe, hall.scene, stop);
}

std::string codeOf(const Result<std::vector<MadeMotion>>& result) {
    return result ? "none" : result.error().code;
}

TEST(MakeLibrary, MakesEachMannersMotionsNamedAndInOrder) {
    const auto library = made();
    ASSERT_TRUE(library) << describe(library.error());
    std::vector<std::string> names;
    for (const MadeMotion& motion : *library) {
        names.push_back(motion.trajectory.name + " " + motion.role);
        EXPECT_EQ(motion.trajectory.scene, "hall");
    }
    EXPECT_THAT(names, testing::ElementsAre("m001 main", "m002 main", "m003 main", "m004 main", "m005 main",
                                            "p001 practice"));
}

TEST(MakeLibrary, FollowsItsSeedAlone) {
    const auto once = made(), again = made(), other = made(changed(kSmallRecipe, "seed = 5", "seed = 6"));
    ASSERT_TRUE(once && again && other);
    for (std::size_t i = 0; i < once->size(); ++i) {
        EXPECT_EQ((*once)[i].trajectory, (*again)[i].trajectory);
        EXPECT_NE((*once)[i].trajectory, (*other)[i].trajectory);
    }
}

TEST(MakeLibrary, LeavesOtherMannersAsTheyAreWhenOneIsChanged) {
    const auto before = made(), after = made(changed(kSmallRecipe, "[1.2, 1.4]", "[1.5, 1.6]"));
    ASSERT_TRUE(before && after);
    for (std::size_t i = 0; i < 5; ++i)
        EXPECT_EQ((*before)[i].trajectory, (*after)[i].trajectory);
    EXPECT_NE((*before)[5].trajectory, (*after)[5].trajectory);
}

TEST(MakeLibrary, SamplesAtExactlyTheRate) {
    for (const int rate : {7, 20, 30, 64, 250}) {
        const auto library = made(changed(kSmallRecipe, "rate_hz = 10", "rate_hz = " + std::to_string(rate)));
        ASSERT_TRUE(library) << describe(library.error());
        const std::vector<double>& time = library->front().trajectory.time;
        for (std::size_t i = 0; i < time.size(); ++i)
            ASSERT_NEAR(time[i], static_cast<double>(i) / rate, 1e-12) << rate << " Hz";
    }
}

TEST(MakeLibrary, PassesWithoutTouchingAnybodyAndArrivesInTime) {
    const auto library = made();
    ASSERT_TRUE(library);
    for (const MadeMotion& made : *library) {
        const Trajectory& motion = made.trajectory;
        EXPECT_EQ(motion.x.front(), 1);
        EXPECT_NEAR(motion.x.back(), 6, 0.13);
        EXPECT_LE(motion.duration(), 8);
        for (std::size_t i = 0; i < motion.time.size(); ++i)
            EXPECT_GT(std::hypot(motion.x[i] - motion.people[0].x[i], motion.y[i] - motion.people[0].y[i]),
                      0.5);
    }
}

TEST(MakeLibrary, SaysWhyItCannot) {
    EXPECT_EQ(codeOf(made(kSmallRecipe, changed(kHall, "goal = [6, 2]\n", ""))), "recipe.cannot");
    EXPECT_EQ(codeOf(made(kSmallRecipe, changed(kHall, "goal = [6, 2]", "goal = [0.5, 2]"))),
              "recipe.cannot");
    // Somebody stands in a corridor as wide as the cart.
    EXPECT_EQ(codeOf(made(changed(kSmallRecipe, "[[0, 4, 3.2], [10, 3, 3.2]]", "[[0, 4, 2]]"),
                          changed(kHall, "[0, 0.5, 8, 3]", "[0, 1.5, 8, 1]"))),
              "recipe.cannot");
    // One driving gives one motion, and two are asked for.
    const std::string one =
        changed(changed(changed(kSmallRecipe, "[1.0, 2.0]", "[1.5, 1.5]"), "[0.1, 0.5]", "[0, 0]"),
                "[-0.3, 0.5]", "[0, 0]");
    const auto repeats = made(one);
    ASSERT_EQ(codeOf(repeats), "recipe.cannot");
    EXPECT_THAT(repeats.error().values, testing::ElementsAre("plain"));
}

TEST(MakeLibrary, StopsWhenAsked) {
    std::stop_source source;
    source.request_stop();
    EXPECT_EQ(codeOf(made(kSmallRecipe, kHall, source.get_token())), kCancelled);
}

} // namespace
} // namespace whichway
