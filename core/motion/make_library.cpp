// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/library_recipe.h"
#include "core/random.h"

#include <algorithm>
#include <cmath>
#include <numbers>
#include <optional>

namespace whichway {
namespace {

constexpr double kLongestStep = 0.01;    // s, of the integration
constexpr int kMostDraws = 400;          // of one motion
constexpr double kLeastClearance = 0.02; // m, to people and walls
constexpr double kNearRepeat = 0.04;     // m, mean distance at equal times

/// One motion's own numbers, drawn from its manner.
struct Driving {
    double cruise = 0, gap = 0, foresight = 0, side = 0, slowing = 0, unevenness = 0, wander = 0, wait = 0;
    double swayPhase = 0, swayHertz = 0, wanderPhase = 0, wanderHertz = 0, waitAt = 0;
};

Driving drawDriving(const DrivingManner& manner, Random& random) {
    const auto draw = [&](const DrawnRange& range) {
        return range.low + (range.high - range.low) * random.uniform();
    };
    Driving driving;
    driving.cruise = draw(manner.cruise);
    driving.gap = draw(manner.gap);
    driving.foresight = draw(manner.foresight);
    driving.side = draw(manner.side);
    driving.slowing = draw(manner.slowing);
    driving.unevenness = draw(manner.unevenness);
    driving.wander = draw(manner.wander);
    driving.wait = draw(manner.wait);
    driving.swayPhase = 2 * std::numbers::pi * random.uniform();
    driving.swayHertz = 0.4 + 0.8 * random.uniform();
    driving.wanderPhase = 2 * std::numbers::pi * random.uniform();
    driving.wanderHertz = 0.15 + 0.3 * random.uniform();
    driving.waitAt = draw(manner.waitAt);
    return driving;
}

Instant::Position positionAt(const std::vector<std::vector<double>>& path, double t) {
    if (t <= path.front()[0])
        return {path.front()[1], path.front()[2]};
    for (std::size_t i = 1; i < path.size(); ++i)
        if (t < path[i][0]) {
            const double share = (t - path[i - 1][0]) / (path[i][0] - path[i - 1][0]);
            return {path[i - 1][1] + share * (path[i][1] - path[i - 1][1]),
                    path[i - 1][2] + share * (path[i][2] - path[i - 1][2])};
        }
    return {path.back()[1], path.back()[2]};
}

/// Drives one motion along +x to the goal.
class Drive {
public:
    Drive(const LibraryRecipe& recipe, const Scene& scene, const Driving& driving)
        : recipe_(recipe), scene_(scene), driving_(driving) {
        state_.x = recipe.startX;
        state_.y = recipe.startY;
        corridor_ = scene.floor.empty() ? scene.bounds : scene.floor.front();
    }

    /// Nothing if the motion touches something or does not arrive in time.
    std::optional<Trajectory> run() {
        Trajectory motion;
        motion.people.resize(recipe_.people.size());
        const int every = static_cast<int>(std::ceil(1 / (recipe_.rate * kLongestStep) - 1e-9));
        step_ = 1 / (recipe_.rate * every);
        const int most = static_cast<int>(recipe_.mostSeconds / step_ + 1e-9);
        for (int i = 0; i <= most; ++i) {
            const double t = i * step_;
            std::vector<Instant::Position> people;
            for (const auto& path : recipe_.people)
                people.push_back(positionAt(path, t));
            if (touches(people))
                return std::nullopt;
            if (i % every == 0)
                sample(motion, t, people);
            const bool arrived = scene_.goal[0] - state_.x < 0.12 && state_.speed < 0.25;
            if (arrived && i % every == 0)
                return motion;
            steer(t, people);
        }
        return std::nullopt;
    }

private:
    void sample(Trajectory& motion, double t, const std::vector<Instant::Position>& people) const {
        motion.time.push_back(t);
        motion.x.push_back(state_.x);
        motion.y.push_back(state_.y);
        motion.heading.push_back(state_.heading);
        for (std::size_t p = 0; p < people.size(); ++p) {
            motion.people[p].x.push_back(people[p].x);
            motion.people[p].y.push_back(people[p].y);
        }
    }

    bool touches(const std::vector<Instant::Position>& people) const {
        for (const auto& person : people)
            if (std::hypot(person.x - state_.x, person.y - state_.y) <
                scene_.robotRadius + scene_.personRadius + kLeastClearance)
                return true;
        const double half = 0.5 * scene_.robotWidth + kLeastClearance;
        return state_.y - half < corridor_.y || state_.y + half > corridor_.y + corridor_.height;
    }

    /// Where across the corridor it wants to be: its own line, moved away from whoever is near ahead or
    /// beside.
    double wantedY(double t, const std::vector<Instant::Position>& people) const {
        const double line = scene_.keepRightAxis - driving_.side +
                            driving_.wander * std::sin(2 * std::numbers::pi * driving_.wanderHertz * t +
                                                       driving_.wanderPhase);
        double y = line;
        for (const auto& person : people) {
            if (person.y < corridor_.y || person.y > corridor_.y + corridor_.height)
                continue;
            const double ahead = person.x - state_.x;
            // Begins `foresight` ahead and ends half a metre behind the person.
            const double reach = ahead > 0 ? driving_.foresight : 0.5;
            const double nearness = std::exp(-0.5 * ahead * ahead / (reach * reach));
            const double room = driving_.gap + scene_.robotRadius + scene_.personRadius;
            const double away = person.y < scene_.keepRightAxis ? 1.0 : -1.0;
            const double short_ = room - away * (line - person.y);
            if (short_ > 0)
                y += away * short_ * nearness;
        }
        const double margin = 0.5 * scene_.robotWidth + 0.08;
        return std::clamp(y, corridor_.y + margin, corridor_.y + corridor_.height - margin);
    }

    double wantedSpeed(double t, const std::vector<Instant::Position>& people) {
        double nearest = 1e9;
        for (const auto& person : people)
            nearest = std::min(nearest, std::hypot(person.x - state_.x, person.y - state_.y) -
                                            scene_.robotRadius - scene_.personRadius);
        nearest = std::max(0.0, nearest);
        double speed =
            driving_.cruise * (1 - driving_.slowing * std::exp(-0.5 * nearest * nearest / (0.6 * 0.6)));
        speed *= 1 + driving_.unevenness *
                         std::sin(2 * std::numbers::pi * driving_.swayHertz * t + driving_.swayPhase);
        const double left = scene_.goal[0] - state_.x;
        const double done = (state_.x - recipe_.startX) / (scene_.goal[0] - recipe_.startX);
        if (driving_.wait > 0 && done >= driving_.waitAt && waited_ < driving_.wait) {
            waited_ += step_;
            return 0;
        }
        return std::min(speed, std::sqrt(std::max(0.0, 1.6 * recipe_.base.acceleration * left)) + 0.05);
    }

    void steer(double t, const std::vector<Instant::Position>& people) {
        constexpr double kLookAhead = 0.9; // m
        const double left = std::max(0.0, scene_.goal[0] - state_.x);
        // Over the last stretch it settles on the goal's own line.
        const double settle = std::clamp(1 - left / 2.0, 0.0, 1.0);
        const double y = (1 - settle) * wantedY(t, people) + settle * scene_.goal[1];
        const double wantedHeading = std::atan2(y - state_.y, kLookAhead);
        state_ = driveFor(step_, state_, wantedSpeed(t, people), 2.5 * (wantedHeading - state_.heading),
                          recipe_.base);
    }

    const LibraryRecipe& recipe_;
    const Scene& scene_;
    const Driving& driving_;
    Rectangle corridor_;
    BaseState state_;
    double step_ = 0; ///< s
    double waited_ = 0;
};

bool nearlyRepeats(const Trajectory& a, const Trajectory& b) {
    const std::size_t both = std::min(a.time.size(), b.time.size());
    if (std::max(a.time.size(), b.time.size()) > both + 2)
        return false;
    double sum = 0;
    for (std::size_t i = 0; i < both; ++i)
        sum += std::hypot(a.x[i] - b.x[i], a.y[i] - b.y[i]);
    return sum / static_cast<double>(both) < kNearRepeat;
}

} // namespace

Result<std::vector<MadeMotion>> makeLibrary(const LibraryRecipe& recipe, const Scene& scene,
                                            std::stop_token stop) {
    if (scene.goal.size() != 2)
        return Error{.code = "recipe.cannot",
                     .place = {.file = recipe.scenePath},
                     .message = "The scene has no goal to drive to.",
                     .remedy = "Give it goal = [x, y]."};
    if (!(scene.goal[0] > recipe.startX))
        return Error{.code = "recipe.cannot",
                     .place = {.file = recipe.scenePath},
                     .message = "The goal does not lie to the right of the start.",
                     .remedy = "Motions are driven along +x: move the start or the goal."};
    std::vector<MadeMotion> made;
    std::vector<std::pair<std::string, int>> numbers; // last number of each prefix
    for (std::size_t m = 0; m < recipe.manners.size(); ++m) {
        const DrivingManner& manner = recipe.manners[m];
        Random random(deriveSeed(recipe.seed, m));
        auto last = std::find_if(numbers.begin(), numbers.end(),
                                 [&](const auto& n) { return n.first == manner.prefix; });
        if (last == numbers.end())
            last = numbers.insert(numbers.end(), {manner.prefix, 0});
        for (int i = 0; i < manner.count; ++i) {
            std::optional<Trajectory> motion;
            for (int draw = 0; draw < kMostDraws && !motion; ++draw) {
                if (stop.stop_requested())
                    return Error{.code = kCancelled, .place = {}, .message = "Stopped.", .remedy = ""};
                const Driving driving = drawDriving(manner, random);
                motion = Drive(recipe, scene, driving).run();
                if (motion && std::any_of(made.begin(), made.end(), [&](const MadeMotion& other) {
                        return nearlyRepeats(*motion, other.trajectory);
                    }))
                    motion.reset();
            }
            if (!motion)
                return Error{.code = "recipe.cannot",
                             .place = {},
                             .message = "The manner “" + manner.name +
                                        "” gives no motion that arrives in time, touches "
                                        "nobody and is new.",
                             .remedy = "Widen its ranges or lower its count.",
                             .values = {manner.name}};
            std::string number = std::to_string(++last->second);
            number.insert(0, number.size() < 3 ? 3 - number.size() : 0, '0');
            motion->name = manner.prefix + number;
            motion->scene = scene.name;
            made.push_back({.trajectory = std::move(*motion), .role = manner.role});
        }
    }
    return made;
}

} // namespace whichway
