// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/write_library.h"

#include "core/files/csv.h"
#include "core/files/file_system.h"
#include "core/motion/library_recipe.h"
#include "core/motion/scene_file.h"
#include "core/motion/trajectory_file.h"

namespace whichway {
namespace {

constexpr std::uint64_t kLongestFile = 4u << 20;

std::string folderOf(const std::string& path) {
    const auto slash = path.find_last_of('/');
    return slash == std::string::npos ? "." : path.substr(0, slash);
}

} // namespace

Result<WrittenLibrary> writeLibrary(FileSystem& files, const std::string& recipePath,
                                    const std::string& folder, std::stop_token stop) {
    const auto recipeText = files.read(recipePath, kLongestFile);
    if (!recipeText)
        return recipeText.error();
    WrittenLibrary written;
    RecipeReading recipe = parseRecipe(*recipeText, recipePath);
    written.problems = std::move(recipe.problems);
    if (!written.problems.empty())
        return written;
    const std::string scenePath = folderOf(recipePath) + "/" + recipe.recipe.scenePath;
    const auto sceneText = files.read(scenePath, kLongestFile);
    if (!sceneText)
        return sceneText.error();
    SceneReading scene = parseScene(*sceneText, scenePath);
    written.problems = std::move(scene.problems);
    if (!written.problems.empty())
        return written;
    const auto made = makeLibrary(recipe.recipe, scene.scene, stop);
    if (!made)
        return made.error();

    if (auto folderMade = files.createDirectory(folder + "/trajectories"); !folderMade)
        return folderMade.error();
    CsvBuilder library({"trajectory", "scene", "role"});
    for (const MadeMotion& motion : *made) {
        const std::string path = folder + "/trajectories/" + motion.trajectory.name + ".csv";
        if (auto saved = files.replace(path, writeTrajectory(motion.trajectory, recipe.recipe.decimals));
            !saved)
            return saved.error();
        library.text(motion.trajectory.name).text(motion.trajectory.scene).text(motion.role).endRow();
    }
    if (auto saved = files.replace(folder + "/library.csv", library.content()); !saved)
        return saved.error();
    const std::string sceneCopy = folder + "/" + recipe.recipe.scenePath;
    if (sceneCopy != scenePath) {
        if (auto sceneFolder = files.createDirectory(folderOf(sceneCopy)); !sceneFolder)
            return sceneFolder.error();
        if (auto saved = files.replace(sceneCopy, *sceneText); !saved)
            return saved.error();
    }
    written.motions = static_cast<int>(made->size());
    return written;
}

} // namespace whichway
