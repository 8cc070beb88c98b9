// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/scene_file.h"

#include "core/files/toml_table.h"

#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

constexpr std::size_t kMostItems = 2000;
constexpr double kLargest = 10000; // m

class Reader {
public:
    explicit Reader(TomlTable table) : table_(std::move(table)) {}

    Scene read() {
        Scene scene;
        scene.name = table_.text("name");
        const bool named = !scene.name.empty() && scene.name.size() <= 64 &&
                           std::all_of(scene.name.begin(), scene.name.end(), [](unsigned char c) {
                               return c == '_' || c == '-' || (c < 128 && std::isalnum(c));
                           });
        if (!named && table_.has("name") && !table_.isFaulty("name"))
            table_.report("scene.name", table_.placeOf("name"),
                          "“" + scene.name + "” is not a name for a scene.",
                          "Use 1 to 64 letters, digits, “-” or “_”.");
        if (!table_.has("bounds"))
            table_.report("toml.missing-key", table_.placeOf("bounds"), "The key “bounds” is missing.",
                          "Give the rectangle that is drawn as [x, y, width, height] in metres.");
        const std::vector<double> bounds = table_.numbers("bounds", 4);
        if (bounds.size() == 4)
            scene.bounds = rectangle(bounds, "bounds");
        for (const auto& row : rows("floor", 4))
            scene.floor.push_back(rectangle(row, "floor"));
        for (const auto& row : rows("walls", 4))
            scene.walls.push_back({row[0], row[1], row[2], row[3]});
        for (const auto& row : rows("doors", 5)) {
            if (!(row[2] > 0))
                range("doors", "The width of a door is not above 0.");
            scene.doors.push_back({row[0], row[1], row[2], row[3], row[4]});
        }
        for (const auto& row : rows("furniture", 4))
            scene.furniture.push_back(rectangle(row, "furniture"));
        scene.goal = table_.numbers("goal", table_.has("goal") ? 2 : 0);
        if (auto robot = table_.table("robot")) {
            scene.robotLength = positive(*robot, "length");
            scene.robotWidth = positive(*robot, "width");
            scene.robotRadius = positive(*robot, "radius");
            robot->refuseOthers();
        } else {
            table_.report("toml.missing-key", table_.placeOf("robot"), "The key “robot” is missing.",
                          "Give robot = { length = …, width = …, radius = … } in metres.");
        }
        scene.personRadius = positive(table_, "person_radius");
        scene.keepRightAxis = table_.number("keep_right_axis", 0.0);
        table_.refuseOthers();
        return scene;
    }

private:
    void range(const std::string& key, const std::string& message) {
        table_.report("scene.range", table_.placeOf(key), message, "Lengths are metres, angles radians.");
    }

    Rectangle rectangle(const std::vector<double>& row, const std::string& key) {
        if (!(row[2] > 0 && row[3] > 0))
            range(key, "A rectangle of “" + key + "” has no width or no height.");
        return {row[0], row[1], row[2], row[3]};
    }

    static double positive(TomlTable& table, const std::string& key) {
        const double value = table.number(key);
        if (table.has(key) && !table.isFaulty(key) && !(value > 0 && value <= 10))
            table.report("scene.range", table.placeOf(key), "“" + key + "” is not between 0 and 10 m.",
                         "Give it in metres.");
        return value;
    }

    std::vector<std::vector<double>> rows(const std::string& key, std::size_t length) {
        auto found = table_.rows(key, length);
        if (found.size() > kMostItems) {
            table_.report("scene.too-many", table_.placeOf(key),
                          "“" + key + "” has more than " + std::to_string(kMostItems) + " items.",
                          "Simplify the scene.");
            found.clear();
        }
        for (const auto& row : found)
            for (const double value : row)
                if (std::abs(value) > kLargest) {
                    range(key, "A number of “" + key + "” is beyond 10 km.");
                    return {};
                }
        return found;
    }

    TomlTable table_;
};

} // namespace

SceneReading parseScene(std::string_view content, const std::string& file) {
    SceneReading reading;
    if (auto table = TomlTable::parse(content, file, reading.problems))
        reading.scene = Reader(std::move(*table)).read();
    return reading;
}

} // namespace whichway
