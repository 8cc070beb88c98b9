// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/library_recipe.h"

#include "core/files/toml_table.h"

#include <algorithm>
#include <fmt/format.h>

namespace whichway {
namespace {

class Reader {
public:
    explicit Reader(TomlTable table) : table_(std::move(table)) {}

    LibraryRecipe read() {
        LibraryRecipe recipe;
        if (table_.integer("format") != 1 && table_.has("format") && !table_.isFaulty("format"))
            table_.report("recipe.format", table_.placeOf("format"),
                          "This program reads recipes of format 1.", "Write format = 1.");
        (void)table_.flag("invented", false); // said in the study file; here for whoever reads the recipe
        recipe.scenePath = table_.text("scene");
        if (recipe.scenePath.find("..") != std::string::npos || recipe.scenePath.starts_with('/'))
            table_.report("recipe.path", table_.placeOf("scene"),
                          "The scene must stand beside or below the recipe.",
                          "Write a relative path such as “scenes/ward.toml”.");
        recipe.seed = static_cast<std::uint64_t>(table_.integer("seed"));
        recipe.rate = within(table_, "rate_hz", 5, 1000, 20);
        recipe.mostSeconds = within(table_, "most_seconds", 0.5, 60, 10);
        recipe.decimals = static_cast<int>(table_.integer("decimals", 5));
        if (recipe.decimals < 2 || recipe.decimals > 9)
            range(table_, "decimals", "is not 2 to 9");
        const std::vector<double> start = table_.numbers("start", 2);
        table_.require("start");
        if (start.size() == 2) {
            recipe.startX = start[0];
            recipe.startY = start[1];
        }
        table_.require("base");
        if (auto base = table_.table("base")) {
            recipe.base.speed = within(*base, "speed", 0.05, 20);
            recipe.base.acceleration = within(*base, "acceleration", 0.05, 50);
            recipe.base.turnRate = within(*base, "turn_rate", 0.05, 20);
            recipe.base.turnAcceleration = within(*base, "turn_acceleration", 0.05, 200);
            base->refuseOthers();
        }
        for (TomlTable& person : table_.tables("person"))
            recipe.people.push_back(readPerson(person));
        for (TomlTable& manner : table_.tables("manner"))
            recipe.manners.push_back(readManner(manner));
        table_.require("manner");
        int total = 0;
        for (const DrivingManner& manner : recipe.manners)
            total += manner.count;
        if (total > 5000)
            table_.report("recipe.too-many", table_.placeOf("manner"),
                          "The recipe makes more than 5000 motions.", "Lower the counts.");
        table_.refuseOthers();
        return recipe;
    }

private:
    static void range(TomlTable& table, const std::string& key, const std::string& what) {
        table.report("recipe.range", table.placeOf(key), "“" + key + "” " + what + ".", "", {key});
    }

    static double within(TomlTable& table, const std::string& key, double low, double high,
                         std::optional<double> otherwise = std::nullopt) {
        const double value = table.number(key, otherwise);
        if (table.has(key) && !table.isFaulty(key) && !(value >= low && value <= high))
            range(table, key, "is out of range");
        return value;
    }

    static std::vector<std::vector<double>> readPerson(TomlTable& person) {
        auto path = person.rows("path", 3);
        person.require("path");
        for (std::size_t i = 1; i < path.size(); ++i)
            if (!(path[i][0] > path[i - 1][0])) {
                range(person, "path", "has times that do not grow");
                break;
            }
        if (person.has("path") && path.empty() && !person.isFaulty("path"))
            range(person, "path", "is empty");
        person.refuseOthers();
        return path;
    }

    static DrawnRange drawn(TomlTable& manner, const std::string& key, DrawnRange otherwise, double low,
                            double high) {
        const std::vector<double> values = manner.numbers(key, 2);
        if (values.size() != 2)
            return otherwise;
        if (!(values[0] <= values[1]))
            range(manner, key, "has its larger number first");
        else if (values[0] < low || values[1] > high)
            range(manner, key, fmt::format("does not lie between {} and {}", low, high));
        return {values[0], values[1]};
    }

    static DrivingManner readManner(TomlTable& table) {
        DrivingManner manner;
        manner.name = table.text("name");
        manner.role = table.text("role", "main");
        if (manner.role != "main" && manner.role != "practice" && manner.role != "catch")
            table.report("recipe.role", table.placeOf("role"), "“" + manner.role + "” is no role.",
                         "Roles are “main”, “practice” and “catch”.", {manner.role});
        manner.prefix = table.text("prefix", "m");
        const bool plain = !manner.prefix.empty() && manner.prefix.size() <= 20 &&
                           std::all_of(manner.prefix.begin(), manner.prefix.end(),
                                       [](char c) { return (c >= 'a' && c <= 'z') || c == '_'; });
        if (!plain)
            range(table, "prefix", "is not made of small letters");
        manner.count = static_cast<int>(table.integer("count"));
        if (table.has("count") && !table.isFaulty("count") && (manner.count < 1 || manner.count > 5000))
            range(table, "count", "is not 1 to 5000");
        table.require("cruise");
        manner.cruise = drawn(table, "cruise", {}, 0.05, 20);
        manner.gap = drawn(table, "gap", {0.3, 0.3}, 0, 20);
        manner.foresight = drawn(table, "foresight", {1.5, 1.5}, 0.05, 50);
        manner.side = drawn(table, "side", {0, 0}, -50, 50);
        manner.slowing = drawn(table, "slowing", {0, 0}, 0, 1);
        manner.unevenness = drawn(table, "unevenness", {0, 0}, 0, 1);
        manner.wander = drawn(table, "wander", {0, 0}, 0, 20);
        manner.wait = drawn(table, "wait", {0, 0}, 0, 60);
        manner.waitAt = drawn(table, "wait_at", {0.25, 0.65}, 0, 1);
        table.refuseOthers();
        return manner;
    }

    TomlTable table_;
};

} // namespace

RecipeReading parseRecipe(std::string_view content, const std::string& file) {
    RecipeReading reading;
    if (auto table = TomlTable::parse(content, file, reading.problems))
        reading.recipe = Reader(std::move(*table)).read();
    return reading;
}

} // namespace whichway
