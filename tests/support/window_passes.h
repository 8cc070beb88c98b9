// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <algorithm>
#include <cmath>
#include <fmt/format.h>
#include <map>
#include <string>
#include <vector>

namespace whichway {

// The recipe of sample_studies/given_features, an invented study: a robot wipes a window pane 1 m wide and
// 0.8 m high in parallel lanes, seen from the front, and its lab computed the features itself.

struct WindowPass {
    std::string name = {};
    double speed = 0;     ///< along the path, m/s
    int lanes = 0;        ///< parallel to the longer side, or to the shorter one if `upright`
    bool upright = false; ///< lanes go up and down
    double margin = 0;    ///< least distance of the blade's centre from the frame, m
    double blade = 0;     ///< width that the blade wipes, m
    double water = 0;     ///< flow, l/s
    double sway = 0;      ///< amplitude across the lane, m, as a triangle wave of 0.2 m length
};

/// 40 passes whose settings are spread evenly (fractions of multiples of square roots), four for practice and
/// two for catch trials, of which c1 is better than c2 on every count.
inline std::vector<WindowPass> windowPasses() {
    const auto fraction = [](double value) { return value - std::floor(value); };
    std::vector<WindowPass> passes = {{"c1", 0.9, 4, false, 0.1, 0.22, 0.005, 0.0},
                                      {"c2", 0.6, 5, false, 0.12, 0.1, 0.019, 0.028}};
    for (int k = 1; k <= 44; ++k) {
        WindowPass pass;
        pass.name = k <= 40 ? fmt::format("w{:02}", k) : fmt::format("p{}", k - 40);
        pass.speed = 0.6 + 0.6 * fraction(k * std::sqrt(2.0));
        pass.lanes = 3 + static_cast<int>(4 * fraction(k * std::sqrt(3.0)));
        pass.upright = k % 3 == 0;
        pass.margin = 0.06 + 0.1 * fraction(k * std::sqrt(5.0));
        pass.blade = 0.12 + 0.14 * fraction(k * std::sqrt(7.0));
        pass.water = 0.004 + 0.016 * fraction(k * std::sqrt(11.0));
        pass.sway = 0.03 * fraction(k * std::sqrt(13.0));
        passes.push_back(pass);
    }
    return passes;
}

struct PassLine {
    double x = 0, y = 0, heading = 0, start = 0, length = 0; ///< m, rad, and m along the path
};

/// The lanes and the steps between them, from the lower left.
inline std::vector<PassLine> linesOf(const WindowPass& pass) {
    constexpr double kQuarter = 1.5707963267948966;
    const double along = (pass.upright ? 0.8 : 1.0) - 2 * pass.margin;
    const double across = (pass.upright ? 1.0 : 0.8) - 2 * pass.margin;
    const double step = across / (pass.lanes - 1);
    std::vector<PassLine> lines;
    double start = 0;
    for (int lane = 0; lane < pass.lanes; ++lane) {
        const bool back = lane % 2 == 1;
        const double a = pass.margin + (back ? along : 0);
        const double b = pass.margin + lane * step;
        lines.push_back({pass.upright ? b : a, pass.upright ? a : b,
                         pass.upright ? (back ? -kQuarter : kQuarter) : (back ? 2 * kQuarter : 0.0), start,
                         along});
        start += along;
        if (lane + 1 < pass.lanes) {
            const double c = pass.margin + (back ? 0 : along);
            lines.push_back(
                {pass.upright ? b : c, pass.upright ? c : b, pass.upright ? 0.0 : kQuarter, start, step});
            start += step;
        }
    }
    return lines;
}

inline double lengthOf(const WindowPass& pass) {
    const std::vector<PassLine> lines = linesOf(pass);
    return lines.back().start + lines.back().length;
}

/// States ten times a second and at the end.
inline std::string trajectoryOf(const WindowPass& pass) {
    const std::vector<PassLine> lines = linesOf(pass);
    const double length = lengthOf(pass);
    const int whole = static_cast<int>(length / pass.speed * 10);
    std::string text = "time_s,x_m,y_m,heading_rad\n";
    for (int i = 0; i <= whole + 1; ++i) {
        const double time = i <= whole ? i / 10.0 : length / pass.speed;
        if (i == whole + 1 && time - whole / 10.0 < 0.005)
            break;
        const double s = std::min(time * pass.speed, length);
        const PassLine* line = &lines.front();
        for (const PassLine& candidate : lines)
            if (candidate.start <= s)
                line = &candidate;
        const double phase = s / 0.2 - std::floor(s / 0.2);
        const double sway = pass.sway * (phase < 0.25   ? 4 * phase
                                         : phase < 0.75 ? 2 - 4 * phase
                                                        : 4 * phase - 4);
        const double forward = s - line->start;
        const bool alongX = std::fabs(line->heading) < 0.1 || line->heading > 3;
        const double sign = line->heading > 3 || line->heading < -1 ? -1 : 1;
        text += fmt::format("{:.3f},{:.4f},{:.4f},{:.4f}\n", time, line->x + (alongX ? sign * forward : sway),
                            line->y + (alongX ? sway : sign * forward), line->heading);
    }
    return text;
}

/// cleaning_time (s), missed (% of the glass), water (l), noise (dB), frame_distance (m).
inline std::string featuresOf(const WindowPass& pass) {
    const double time = lengthOf(pass) / pass.speed;
    const double height = pass.upright ? 1.0 : 0.8;
    const double gap = (height - 2 * pass.margin) / (pass.lanes - 1) - pass.blade;
    const double missed =
        100 * (std::max(0.0, gap) * (pass.lanes - 1) + 2 * std::max(0.0, pass.margin - pass.blade / 2)) /
            height +
        60 * pass.sway;
    const double noise = 48 + 20 * (pass.speed - 0.6) + 500 * (pass.water - 0.004);
    return fmt::format("{},{:.3f},{:.2f},{:.4f},{:.1f},{:.3f}\n", pass.name, time, missed, pass.water * time,
                       noise, pass.margin - pass.sway);
}

/// All files but study.toml, by their path in the folder.
inline std::map<std::string, std::string> windowPassFiles() {
    std::map<std::string, std::string> files;
    std::string& features = files["features.csv"] =
        "trajectory,cleaning_time,missed,water,noise,frame_distance\n";
    std::string& library = files["library.csv"] = "trajectory,role\n";
    for (const WindowPass& pass : windowPasses()) {
        files[fmt::format("trajectories/{}.csv", pass.name)] = trajectoryOf(pass);
        const char kind = pass.name.front();
        library += fmt::format("{},{}\n", pass.name,
                               kind == 'w'   ? "main"
                               : kind == 'p' ? "practice"
                                             : "catch");
        features += featuresOf(pass);
    }
    return files;
}

} // namespace whichway
