// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/trajectory_file.h"

#include "core/files/csv.h"
#include "core/files/nearest_name.h"

#include <algorithm>
#include <charconv>
#include <cmath>
#include <map>
#include <numbers>
#include <optional>
#include <set>

namespace whichway {
namespace {

constexpr std::size_t kMostSamples = 20000;
constexpr std::size_t kMostPeople = 50;
constexpr double kFarthest = 10000;   // m
constexpr double kStandsBelow = 0.02; // m/s: too slow to tell a direction from noise
constexpr std::size_t kMostTold = 20; // problems: the same fault in every row is told often enough

/// What a column holds: 0 time, 1 x, 2 y, 3 heading, then two for each person.
constexpr std::size_t kTime = 0, kX = 1, kY = 2, kHeading = 3, kFirstPerson = 4;

/// "person12_x" gives 12; nothing if it is no such name.
std::optional<std::size_t> personOf(std::string_view quantity) {
    constexpr std::string_view kPrefix = "person";
    if (!quantity.starts_with(kPrefix) || quantity.size() < kPrefix.size() + 3)
        return std::nullopt;
    const std::string_view number = quantity.substr(kPrefix.size(), quantity.size() - kPrefix.size() - 2);
    if (number.front() == '0') // "person01" would be a second name of person 1
        return std::nullopt;
    std::size_t person = 0;
    const auto [end, status] = std::from_chars(number.data(), number.data() + number.size(), person);
    if (status != std::errc() || end != number.data() + number.size() || person < 1 || person > kMostPeople)
        return std::nullopt;
    return person;
}

struct Column {
    std::optional<std::size_t> slot = {};
    std::string wantedUnit = {};
    bool unitIsRight = false;
};

Column columnOf(std::string_view name) {
    const std::size_t at = name.rfind('_');
    const std::string_view quantity = name.substr(0, at);
    const std::string_view unit = at == std::string_view::npos ? "" : name.substr(at + 1);
    Column column;
    if (quantity == "time") {
        column.slot = kTime;
        column.wantedUnit = "s";
    } else if (quantity == "x" || quantity == "y") {
        column.slot = quantity == "x" ? kX : kY;
        column.wantedUnit = "m";
    } else if (quantity == "heading") {
        column.slot = kHeading;
        column.wantedUnit = "rad";
    } else if (const auto person = personOf(quantity);
               person && (quantity.ends_with("_x") || quantity.ends_with("_y"))) {
        column.slot = kFirstPerson + 2 * (*person - 1) + (quantity.ends_with("_y") ? 1 : 0);
        column.wantedUnit = "m";
    }
    column.unitIsRight = column.slot && unit == column.wantedUnit;
    return column;
}

class Reader {
public:
    Reader(const std::string& file) : file_(file) {}

    TrajectoryReading read(std::string_view content) {
        const auto table =
            parseCsv(content, file_, {.rows = kMostSamples + 1, .columns = kFirstPerson + 2 * kMostPeople});
        if (!table) {
            reading_.problems.push_back(table.error());
            return std::move(reading_);
        }
        readHeader(*table);
        if (!reading_.problems.empty())
            return std::move(reading_);
        readRows(*table);
        if (!reading_.problems.empty())
            return std::move(reading_);
        checkTimes(*table);
        finish();
        return std::move(reading_);
    }

private:
    void report(const std::string& code, int line, int column, const std::string& message,
                const std::string& remedy, std::vector<std::string> values = {}) {
        reading_.problems.push_back({.code = code,
                                     .place = {.file = file_, .line = line, .column = column},
                                     .message = message,
                                     .remedy = remedy,
                                     .values = std::move(values)});
    }

    void readHeader(const CsvTable& table) {
        const std::vector<std::string> known = {"time_s",      "x_m",         "y_m",
                                                "heading_rad", "person1_x_m", "person1_y_m"};
        std::set<std::size_t> misnamed; // there, but under a wrong name: not missing as well
        for (std::size_t i = 0; i < table.header.size(); ++i) {
            const CsvCell& cell = table.header[i];
            const Column column = columnOf(cell.text);
            if (column.unitIsRight) {
                at_[*column.slot] = i;
            } else if (column.slot) {
                misnamed.insert(*column.slot);
                const std::string right = cell.text.substr(0, cell.text.rfind('_')) + "_" + column.wantedUnit;
                report("trajectory.unit", cell.line, cell.column,
                       "The column “" + cell.text + "” is not in the unit that this program reads.",
                       "Convert the values and name the column “" + right + "”.", {cell.text, right});
            } else {
                const std::string nearest = nearestName(cell.text, known);
                if (const Column meant = columnOf(nearest); meant.slot)
                    misnamed.insert(*meant.slot);
                report("trajectory.unknown-column", cell.line, cell.column,
                       "“" + cell.text + "” is not a column of a motion.",
                       nearest.empty() ? "Remove it." : "Did you mean “" + nearest + "”?",
                       {cell.text, nearest});
            }
        }
        std::size_t people = 0;
        for (const auto& [slot, index] : at_)
            if (slot >= kFirstPerson)
                people = std::max(people, (slot - kFirstPerson) / 2 + 1);
        const auto require = [&](std::size_t slot, const std::string& name) {
            if (!at_.contains(slot) && !misnamed.contains(slot))
                report("trajectory.missing-column", table.header.front().line, 1,
                       "The column “" + name + "” is missing.", "Add it.", {name});
        };
        require(kTime, "time_s");
        require(kX, "x_m");
        require(kY, "y_m");
        for (std::size_t person = 0; person < people; ++person) {
            require(kFirstPerson + 2 * person, "person" + std::to_string(person + 1) + "_x_m");
            require(kFirstPerson + 2 * person + 1, "person" + std::to_string(person + 1) + "_y_m");
        }
        reading_.trajectory.people.resize(people);
    }

    std::vector<double>& listOf(std::size_t slot) {
        Trajectory& motion = reading_.trajectory;
        switch (slot) {
        case kTime:
            return motion.time;
        case kX:
            return motion.x;
        case kY:
            return motion.y;
        case kHeading:
            return motion.heading;
        default: {
            PersonTrack& person = motion.people[(slot - kFirstPerson) / 2];
            return (slot - kFirstPerson) % 2 == 0 ? person.x : person.y;
        }
        }
    }

    void readRows(const CsvTable& table) {
        if (table.rows.size() > kMostSamples) {
            report("trajectory.too-long", table.rows.back().front().line, 1,
                   "The motion has more than " + std::to_string(kMostSamples) + " samples.",
                   "Sample it less often.");
            return;
        }
        if (table.rows.size() < 2) {
            report("trajectory.too-short", table.header.front().line, 1,
                   "The motion has " + std::to_string(table.rows.size()) +
                       " samples, and at least 2 are needed.",
                   "Record it again or remove the file.");
            return;
        }
        for (const auto& [slot, index] : at_) {
            std::vector<double>& list = listOf(slot);
            for (const auto& row : table.rows) {
                const auto value = numberIn(row[index], file_);
                if (!value)
                    reading_.problems.push_back(value.error());
                else if (slot != kTime && slot != kHeading && std::abs(*value) > kFarthest)
                    report("trajectory.too-far", row[index].line, row[index].column,
                           "The coordinate is beyond 10 km.", "Check the unit: it is metres here.");
                else
                    list.push_back(*value);
                if (reading_.problems.size() >= kMostTold)
                    return;
            }
        }
        std::stable_sort(
            reading_.problems.begin(), reading_.problems.end(), [](const Error& a, const Error& b) {
                return std::pair(a.place.line, a.place.column) < std::pair(b.place.line, b.place.column);
            });
    }

    void checkTimes(const CsvTable& table) {
        const std::vector<double>& time = reading_.trajectory.time;
        const std::size_t index = at_.at(kTime);
        std::vector<double> steps;
        for (std::size_t i = 1; i < time.size(); ++i) {
            const CsvCell& cell = table.rows[i][index];
            steps.push_back(time[i] - time[i - 1]);
            if (time[i] > time[i - 1])
                continue;
            const bool repeats = time[i] == time[i - 1];
            report(repeats ? "trajectory.time-repeats" : "trajectory.time-backward", cell.line, cell.column,
                   repeats ? "The time " + cell.text + " s is that of the row before."
                           : "The time " + cell.text + " s lies before that of the row before.",
                   repeats ? "Keep one of the two rows."
                           : "Sort the rows by time, or remove the clock's jump.",
                   {cell.text});
            if (reading_.problems.size() >= kMostTold)
                return;
        }
        std::nth_element(steps.begin(), steps.begin() + static_cast<std::ptrdiff_t>(steps.size() / 2),
                         steps.end());
        if (steps[steps.size() / 2] >= 5) {
            const CsvCell& cell = table.header[index];
            report("trajectory.time-looks-like-ms", cell.line, cell.column,
                   "The samples are 5 s apart or more: the times look like milliseconds.",
                   "Divide them by 1000, so that they are seconds.");
        }
    }

    void finish() {
        Trajectory& motion = reading_.trajectory;
        const double start = motion.time.front();
        for (double& t : motion.time)
            t -= start;
        if (!at_.contains(kHeading))
            takeHeadingFromMovement();
        constexpr double kTurn = 2 * std::numbers::pi;
        for (std::size_t i = 1; i < motion.heading.size(); ++i)
            motion.heading[i] -= kTurn * std::round((motion.heading[i] - motion.heading[i - 1]) / kTurn);
    }

    /// Standing still keeps the heading of the last movement, or takes that of the first one to come, so that
    /// a stop turns nothing.
    void takeHeadingFromMovement() {
        Trajectory& motion = reading_.trajectory;
        motion.heading.assign(motion.time.size(), 0.0);
        bool moved = false;
        for (std::size_t i = 0; i < motion.time.size(); ++i) {
            const std::size_t a = i + 1 < motion.time.size() ? i : i - 1;
            const double dx = motion.x[a + 1] - motion.x[a], dy = motion.y[a + 1] - motion.y[a];
            const double dt = motion.time[a + 1] - motion.time[a];
            if (!(std::hypot(dx, dy) > kStandsBelow * dt)) {
                motion.heading[i] = i > 0 ? motion.heading[i - 1] : 0;
                continue;
            }
            motion.heading[i] = std::atan2(dy, dx);
            if (!moved)
                std::fill_n(motion.heading.begin(), i, motion.heading[i]);
            moved = true;
        }
    }

    const std::string& file_;
    TrajectoryReading reading_;
    std::map<std::size_t, std::size_t> at_; ///< slot to column
};

double roundedTo(double value, double scale) {
    const double rounded = std::round(value * scale) / scale;
    return rounded == 0 ? 0 : rounded; // no "-0" in a file
}

} // namespace

TrajectoryReading parseTrajectory(std::string_view content, const std::string& file) {
    return Reader(file).read(content);
}

std::string writeTrajectory(const Trajectory& trajectory, int decimals) {
    double scale = 1;
    for (int i = 0; i < decimals; ++i)
        scale *= 10;
    std::vector<std::string> header = {"time_s", "x_m", "y_m", "heading_rad"};
    for (std::size_t i = 1; i <= trajectory.people.size(); ++i) {
        header.push_back("person" + std::to_string(i) + "_x_m");
        header.push_back("person" + std::to_string(i) + "_y_m");
    }
    CsvBuilder csv(header);
    for (std::size_t i = 0; i < trajectory.time.size(); ++i) {
        csv.number(roundedTo(trajectory.time[i], 1000));
        csv.number(roundedTo(trajectory.x[i], scale));
        csv.number(roundedTo(trajectory.y[i], scale));
        csv.number(roundedTo(trajectory.heading[i], scale));
        for (const PersonTrack& person : trajectory.people) {
            csv.number(roundedTo(person.x[i], scale));
            csv.number(roundedTo(person.y[i], scale));
        }
        csv.endRow();
    }
    return csv.content();
}

} // namespace whichway
