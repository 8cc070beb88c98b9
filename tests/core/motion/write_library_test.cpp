// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/write_library.h"

#include "core/motion/trajectory_file.h"
#include "tests/core/motion/small_recipe.h"
#include "tests/support/memory_file_system.h"

#include <gmock/gmock.h>

namespace whichway {
namespace {

using motions::changed;
using motions::kHall;
using motions::kSmallRecipe;

MemoryFileSystem disk(const std::string& recipe = kSmallRecipe, const std::string& scene = kHall) {
    MemoryFileSystem files;
    files.place("given/recipe.toml", recipe);
    files.place("given/scenes/hall.toml", scene);
    return files;
}

std::string contentOf(const FileSystem& files, const std::string& path) {
    const Result<std::string> content = files.read(path, 1 << 20);
    EXPECT_TRUE(content) << path;
    return content ? *content : "";
}

TEST(WriteLibrary, WritesAFolderThatReadsBack) {
    MemoryFileSystem files = disk();
    const auto written = writeLibrary(files, "given/recipe.toml", "made");
    ASSERT_TRUE(written) << describe(written.error());
    EXPECT_EQ(written->motions, 6);
    EXPECT_THAT(written->problems, testing::IsEmpty());
    EXPECT_EQ(contentOf(files, "made/library.csv"), "trajectory,scene,role\nm001,hall,main\nm002,hall,"
                                                    "main\nm003,hall,main\nm004,hall,main\nm005,hall,main\n"
                                                    "p001,hall,practice\n");
    EXPECT_EQ(contentOf(files, "made/scenes/hall.toml"), kHall);
    for (const char* name : {"m001", "m005", "p001"}) {
        const std::string path = std::string("made/trajectories/") + name + ".csv";
        EXPECT_THAT(parseTrajectory(contentOf(files, path), path).problems, testing::IsEmpty());
    }
}

TEST(WriteLibrary, WritesTheSameBytesAgain) {
    MemoryFileSystem once = disk(), again = disk();
    ASSERT_TRUE(writeLibrary(once, "given/recipe.toml", "made"));
    ASSERT_TRUE(writeLibrary(again, "given/recipe.toml", "given"));
    EXPECT_EQ(contentOf(once, "made/trajectories/m003.csv"), contentOf(again, "given/trajectories/m003.csv"));
    EXPECT_EQ(contentOf(again, "given/scenes/hall.toml"), kHall);
}

TEST(WriteLibrary, WritesNothingFromAFaultyRecipeOrScene) {
    MemoryFileSystem recipe = disk(changed(kSmallRecipe, "seed", "sead"));
    MemoryFileSystem scene = disk(kSmallRecipe, changed(kHall, "goal", "gaol"));
    for (MemoryFileSystem* files : {&recipe, &scene}) {
        const auto written = writeLibrary(*files, "given/recipe.toml", "made");
        ASSERT_TRUE(written) << describe(written.error());
        EXPECT_EQ(written->motions, 0);
        EXPECT_THAT(written->problems, testing::Not(testing::IsEmpty()));
        EXPECT_EQ(files->kind("made/library.csv"), EntryKind::Missing);
        EXPECT_EQ(files->kind("made/trajectories"), EntryKind::Missing);
    }
}

TEST(WriteLibrary, NamesAFileThatIsMissing) {
    MemoryFileSystem files = disk(changed(kSmallRecipe, "hall.toml", "hell.toml"));
    const auto noScene = writeLibrary(files, "given/recipe.toml", "made");
    ASSERT_FALSE(noScene);
    EXPECT_EQ(noScene.error().code, "file.missing");
    EXPECT_EQ(noScene.error().place.file, "given/scenes/hell.toml");
    const auto noRecipe = writeLibrary(files, "nowhere.toml", "made");
    ASSERT_FALSE(noRecipe);
    EXPECT_EQ(noRecipe.error().code, "file.missing");
}

TEST(WriteLibrary, ReportsAFullDiskAtEveryStep) {
    MemoryFileSystem whole = disk();
    ASSERT_TRUE(writeLibrary(whole, "given/recipe.toml", "made"));
    const std::uint64_t steps = whole.steps();
    ASSERT_GT(steps, 10u);
    for (std::uint64_t step = 1; step <= steps; ++step) {
        MemoryFileSystem files = disk();
        files.failStep(step);
        const auto written = writeLibrary(files, "given/recipe.toml", "made");
        EXPECT_FALSE(written) << "step " << step << " of " << steps;
    }
}

} // namespace
} // namespace whichway
