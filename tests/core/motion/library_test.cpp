// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/file_system.h"
#include "core/motion/dynamics.h"
#include "core/motion/library_recipe.h"
#include "core/motion/scene_file.h"
#include "core/motion/trajectory_file.h"

#include <cmath>
#include <gtest/gtest.h>
#include <numbers>

using namespace whichway;

namespace {

const std::string kWard = std::string(WHICHWAY_SOURCE_DIR) + "/sample_studies/ward_cart/";

std::string read(const std::string& path) {
    const RealFileSystem files;
    const auto content = files.read(path, 8u << 20);
    EXPECT_TRUE(content.ok()) << path;
    return content.ok() ? *content : "";
}

} // namespace

// The committed motions are what the committed recipe makes: the rounded coordinates agree to 1e-9.
TEST(WardCart, IsWhatItsRecipeMakes) {
    const RecipeReading recipe = parseRecipe(read(kWard + "recipe.toml"), "recipe.toml");
    const SceneReading scene = parseScene(read(kWard + "scenes/ward.toml"), "ward.toml");
    ASSERT_TRUE(recipe.problems.empty() && scene.problems.empty());
    const auto made = makeLibrary(recipe.recipe, scene.scene);
    ASSERT_TRUE(made.ok()) << describe(made.error());
    ASSERT_GE(made->size(), 240u);
    for (std::size_t i = 0; i < made->size(); i += 13) {
        const Trajectory& again = (*made)[i].trajectory;
        const TrajectoryReading committed =
            parseTrajectory(read(kWard + "trajectories/" + again.name + ".csv"), again.name);
        const TrajectoryReading rounded =
            parseTrajectory(writeTrajectory(again, recipe.recipe.decimals), again.name);
        ASSERT_TRUE(committed.problems.empty()) << describe(committed.problems.front());
        ASSERT_EQ(committed.trajectory.time.size(), rounded.trajectory.time.size()) << again.name;
        for (std::size_t k = 0; k < committed.trajectory.time.size(); ++k) {
            ASSERT_NEAR(committed.trajectory.x[k], rounded.trajectory.x[k], 1e-9) << again.name;
            ASSERT_NEAR(committed.trajectory.y[k], rounded.trajectory.y[k], 1e-9) << again.name;
            ASSERT_NEAR(committed.trajectory.heading[k], rounded.trajectory.heading[k], 1e-9) << again.name;
        }
    }
}

TEST(WardCart, MovesWithinTheLimitsOfItsBaseTouchesNobodyAndArrivesInTenSeconds) {
    const RecipeReading recipe = parseRecipe(read(kWard + "recipe.toml"), "recipe.toml");
    const SceneReading scene = parseScene(read(kWard + "scenes/ward.toml"), "ward.toml");
    const auto made = makeLibrary(recipe.recipe, scene.scene);
    ASSERT_TRUE(made.ok());
    const double radii = scene.scene.robotRadius + scene.scene.personRadius;
    for (const MadeMotion& motion : *made) {
        const Trajectory& m = motion.trajectory;
        ASSERT_LE(m.duration(), 10.0);
        EXPECT_NEAR(m.x.back(), scene.scene.goal[0], 0.2) << m.name;
        for (std::size_t k = 0; k < m.time.size(); ++k) {
            for (const PersonTrack& person : m.people)
                ASSERT_GT(std::hypot(m.x[k] - person.x[k], m.y[k] - person.y[k]), radii) << m.name;
            if (k == 0)
                continue;
            const double dt = m.time[k] - m.time[k - 1];
            ASSERT_LE(std::hypot(m.x[k] - m.x[k - 1], m.y[k] - m.y[k - 1]) / dt,
                      recipe.recipe.base.speed + 1e-9);
            ASSERT_LE(std::abs(m.heading[k] - m.heading[k - 1]) / dt, recipe.recipe.base.turnRate + 1e-9);
        }
    }
}

TEST(Recipe, ReportsItsProblemsWithTheirPlaces) {
    const RecipeReading reading =
        parseRecipe("format = 1\nscene = \"../up.toml\"\nseed = 1\nstart = [0, 0]\n"
                    "[base]\nspeed = 1\nacceleration = 1\nturn_rate = 1\nturn_aceleration = 1\n"
                    "[[manner]]\nname = \"a\"\ncount = 0\ncruise = [2, 1]\n",
                    "recipe.toml");
    std::vector<std::string> codes;
    for (const Error& problem : reading.problems)
        codes.push_back(problem.code + ":" + std::to_string(problem.place.line));
    EXPECT_NE(std::find(codes.begin(), codes.end(), "recipe.path:2"), codes.end());
    EXPECT_NE(std::find(codes.begin(), codes.end(), "toml.unknown-key:9"), codes.end());
    EXPECT_NE(std::find(codes.begin(), codes.end(), "recipe.range:12"), codes.end());
    EXPECT_NE(std::find(codes.begin(), codes.end(), "recipe.range:13"), codes.end());
}

TEST(Recipe, SaysWhichMannerGivesNoMotion) {
    RecipeReading recipe = parseRecipe(read(kWard + "recipe.toml"), "recipe.toml");
    const SceneReading scene = parseScene(read(kWard + "scenes/ward.toml"), "ward.toml");
    recipe.recipe.manners.resize(1);
    recipe.recipe.manners[0].cruise = {0.1, 0.2}; // too slow to arrive
    const auto made = makeLibrary(recipe.recipe, scene.scene);
    ASSERT_FALSE(made.ok());
    EXPECT_EQ(made.error().code, "recipe.cannot");
    EXPECT_EQ(made.error().values.at(0), "steady");
}

// Closed form: at a constant speed v and turn rate w the base runs on a circle of radius v / w.
TEST(Dynamics, RunsOnACircleAtConstantRates) {
    const BaseLimits limits{.speed = 2, .acceleration = 1e9, .turnRate = 2, .turnAcceleration = 1e9};
    BaseState state{.x = 1, .y = 0, .heading = 0.5 * std::numbers::pi, .speed = 1, .turnRate = 1};
    for (int i = 0; i < 1000; ++i) {
        state = driveFor(0.01, state, 1, 1, limits);
        ASSERT_NEAR(std::hypot(state.x, state.y), 1, 1e-9);
    }
    EXPECT_NEAR(state.heading, 0.5 * std::numbers::pi + 10, 1e-9);
}

TEST(Dynamics, NeverExceedsItsLimits) {
    const BaseLimits limits{.speed = 1, .acceleration = 0.5, .turnRate = 0.7, .turnAcceleration = 2};
    BaseState state;
    for (int i = 0; i < 300; ++i) {
        const BaseState next = driveFor(0.01, state, i < 150 ? 9 : -9, i % 2 ? 9 : -9, limits);
        ASSERT_LE(std::abs(next.speed - state.speed), 0.5 * 0.01 + 1e-12);
        ASSERT_LE(next.speed, 1.0);
        ASSERT_GE(next.speed, 0.0);
        ASSERT_LE(std::abs(next.turnRate), 0.7);
        state = next;
    }
}
