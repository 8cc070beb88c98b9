// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/file_system.h"
#include "core/motion/library_recipe.h"
#include "core/motion/scene_file.h"
#include "core/motion/trajectory_file.h"
#include "tests/core/motion/motions.h"

#include <algorithm>
#include <gmock/gmock.h>

namespace whichway {
namespace {

const std::string kStudy = std::string(WHICHWAY_SOURCE_DIR) + "/sample_studies/ward_cart/";

std::string contentOf(const std::string& name) {
    const Result<std::string> content = RealFileSystem().read(kStudy + name, 4 << 20);
    EXPECT_TRUE(content) << describe(content.error());
    return content ? *content : "";
}

/// The committed sample, and what its recipe makes, once for all tests.
class WardCart : public testing::Test {
protected:
    static void SetUpTestSuite() {
        const RecipeReading recipe = parseRecipe(contentOf("recipe.toml"), "recipe.toml");
        ASSERT_THAT(recipe.problems, testing::IsEmpty());
        recipe_ = recipe.recipe;
        const SceneReading scene = parseScene(contentOf(recipe_.scenePath), recipe_.scenePath);
        ASSERT_THAT(scene.problems, testing::IsEmpty());
        scene_ = scene.scene;
        auto made = makeLibrary(recipe_, scene_);
        ASSERT_TRUE(made) << describe(made.error());
        made_ = *std::move(made);
    }

    /// The committed motion of that name.
    static Trajectory committed(const std::string& name) {
        TrajectoryReading reading = parseTrajectory(contentOf("trajectories/" + name + ".csv"), name);
        EXPECT_THAT(reading.problems, testing::IsEmpty());
        return reading.trajectory;
    }

    static LibraryRecipe recipe_;
    static Scene scene_;
    static std::vector<MadeMotion> made_;
};

LibraryRecipe WardCart::recipe_;
Scene WardCart::scene_;
std::vector<MadeMotion> WardCart::made_;

TEST_F(WardCart, IsWhatItsRecipeMakes) {
    // To 1e-9 beside the rounding of the files: another C library's sine may turn a last digit that stands
    // between two.
    const double nearly = 0.5 * std::pow(10, -recipe_.decimals) + 1e-9;
    const auto expectSame = [&](const std::vector<double>& file, const std::vector<double>& made,
                                double tolerance) {
        ASSERT_EQ(file.size(), made.size());
        for (std::size_t i = 0; i < file.size(); ++i)
            ASSERT_NEAR(file[i], made[i], tolerance) << "sample " << i;
    };
    std::string library = "trajectory,scene,role\n";
    for (const MadeMotion& each : made_) {
        const Trajectory& motion = each.trajectory;
        SCOPED_TRACE(motion.name);
        library += motion.name + ",ward," + each.role + "\n";
        const Trajectory file = committed(motion.name);
        expectSame(file.time, motion.time, 1e-9);
        expectSame(file.x, motion.x, nearly);
        expectSame(file.y, motion.y, nearly);
        expectSame(file.heading, motion.heading, nearly);
        ASSERT_EQ(file.people.size(), motion.people.size());
        for (std::size_t p = 0; p < file.people.size(); ++p) {
            expectSame(file.people[p].x, motion.people[p].x, nearly);
            expectSame(file.people[p].y, motion.people[p].y, nearly);
        }
    }
    EXPECT_EQ(contentOf("library.csv"), library);
}

TEST_F(WardCart, HasEnoughMotionsOfEachRole) {
    const auto count = [&](const char* role) {
        return std::count_if(made_.begin(), made_.end(),
                             [&](const MadeMotion& each) { return each.role == role; });
    };
    EXPECT_GE(count("main"), 240);
    EXPECT_EQ(count("practice"), 8);
    EXPECT_EQ(count("catch"), 8);
}

TEST_F(WardCart, DrivesAsABaseOfItsLimitsCanFromOneStartToTheGoal) {
    for (const MadeMotion& each : made_) {
        const Trajectory& motion = each.trajectory;
        SCOPED_TRACE(motion.name);
        EXPECT_LE(motion.duration(), 10);
        EXPECT_EQ(motion.x.front(), recipe_.startX);
        EXPECT_EQ(motion.y.front(), recipe_.startY);
        EXPECT_NEAR(motion.x.back(), scene_.goal[0], 0.13);
        EXPECT_NEAR(motion.y.back(), scene_.goal[1], 0.45);
        const double step = 1 / recipe_.rate;
        double before = 0;
        for (std::size_t i = 1; i < motion.time.size(); ++i) {
            const double way = std::hypot(motion.x[i] - motion.x[i - 1], motion.y[i] - motion.y[i - 1]);
            EXPECT_LE(way / step, recipe_.base.speed + 1e-9);
            EXPECT_LE(std::abs(way / step - before), recipe_.base.acceleration * step + 0.01);
            EXPECT_LE(std::abs(motion.heading[i] - motion.heading[i - 1]),
                      recipe_.base.turnRate * step + 1e-9);
            before = way / step;
        }
    }
}

TEST_F(WardCart, TouchesNeitherPeopleNorWallsWithItsFootprint) {
    const Rectangle corridor = scene_.floor.front();
    const double length = scene_.robotLength / 2, width = scene_.robotWidth / 2;
    for (const MadeMotion& each : made_) {
        const Trajectory& motion = each.trajectory;
        SCOPED_TRACE(motion.name);
        for (std::size_t i = 0; i < motion.time.size(); ++i) {
            const double c = std::cos(motion.heading[i]), s = std::sin(motion.heading[i]);
            const double across = std::abs(s) * length + std::abs(c) * width;
            ASSERT_GT(motion.y[i] - across, corridor.y);
            ASSERT_LT(motion.y[i] + across, corridor.y + corridor.height);
            for (const PersonTrack& person : motion.people) {
                const double x = person.x[i] - motion.x[i], y = person.y[i] - motion.y[i];
                const double beyondX = std::max(0.0, std::abs(c * x + s * y) - length);
                const double beyondY = std::max(0.0, std::abs(c * y - s * x) - width);
                ASSERT_GT(std::hypot(beyondX, beyondY), scene_.personRadius);
            }
        }
    }
}

TEST_F(WardCart, HasNoNearDuplicates) {
    for (std::size_t a = 0; a < made_.size(); ++a)
        for (std::size_t b = 0; b < a; ++b) {
            double farthest = std::abs(made_[a].trajectory.duration() - made_[b].trajectory.duration());
            for (double t = 0; t < 10; t += 0.5) {
                const Instant one = instantAt(made_[a].trajectory, t),
                              other = instantAt(made_[b].trajectory, t);
                farthest = std::max(farthest, std::hypot(one.x - other.x, one.y - other.y));
            }
            EXPECT_GT(farthest, 0.04) << made_[a].trajectory.name << " and " << made_[b].trajectory.name;
        }
}

TEST_F(WardCart, HasFeaturesThatPullAgainstEachOther) {
    std::vector<std::vector<double>> features; // standardised, a row for each
    const auto add = [&](const char* phrase, const MeasureSettings& settings, bool logarithm) {
        std::vector<double> values;
        for (const MadeMotion& each : made_)
            if (each.role == "main") {
                const double value =
                    motions::numberOf(phrase, committed(each.trajectory.name), settings, &scene_);
                values.push_back(logarithm ? std::log(value) : value);
            }
        const auto n = static_cast<double>(values.size());
        double mean = 0, square = 0, cube = 0;
        for (const double value : values)
            mean += value / n;
        for (const double value : values)
            square += (value - mean) * (value - mean) / n;
        for (double& value : values) {
            value = (value - mean) / std::sqrt(square);
            cube += value * value * value / n;
            EXPECT_LT(std::abs(value), 4) << phrase;
        }
        EXPECT_LT(std::abs(cube), 2) << phrase << " is skewed";
        for (std::size_t i = 0; i < features.size(); ++i) {
            double r = 0;
            for (std::size_t k = 0; k < values.size(); ++k)
                r += values[k] * features[i][k] / n;
            EXPECT_LT(std::abs(r), 0.8) << phrase << " and feature " << i;
        }
        features.push_back(std::move(values));
    };
    // As study.toml has them.
    add("travel time", {}, false);
    add("closest distance to a person", {}, false);
    add("speed beside people", {{"range", 0.35}}, false);
    add("roughness", {{"window", 0.4}}, true);
    add("keeping right", {}, false);
    add("total turning", {}, false);
}

TEST_F(WardCart, HasCatchMotionsThatAreWorseInEveryWay) {
    std::vector<Trajectory> calm, rough;
    for (const MadeMotion& each : made_)
        if (each.role == "catch")
            (each.trajectory.name.starts_with("calm") ? calm : rough).push_back(each.trajectory);
    ASSERT_EQ(calm.size(), 4u);
    ASSERT_EQ(rough.size(), 4u);
    for (const Trajectory& better : calm)
        for (const Trajectory& worse : rough) {
            SCOPED_TRACE(better.name + " and " + worse.name);
            const auto of = [&](const char* phrase, const Trajectory& motion,
                                const MeasureSettings& settings = {}) {
                return motions::numberOf(phrase, motion, settings, &scene_);
            };
            EXPECT_LT(of("travel time", better), of("travel time", worse));
            EXPECT_GT(of("closest distance to a person", better),
                      of("closest distance to a person", worse) + 0.3);
            const MeasureSettings range = {{"range", 0.35}};
            EXPECT_LT(of("speed beside people", better, range), of("speed beside people", worse, range));
            EXPECT_LT(of("roughness", better), 0.5 * of("roughness", worse));
            EXPECT_GT(of("keeping right", better), of("keeping right", worse));
            EXPECT_LT(of("total turning", better), of("total turning", worse));
        }
}

} // namespace
} // namespace whichway
