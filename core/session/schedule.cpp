// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/session/schedule.h"

#include "core/random.h"

#include <algorithm>
#include <cstddef>
#include <set>
#include <span>
#include <string>
#include <utility>

namespace whichway {
namespace {

constexpr std::size_t kRepeatDistance = 5;

/// A trial and where in the session it would like to stand, from 0 to 1.
struct Wish {
    double at = 0;
    int heldOut = -1; ///< which held-out pair a repeat repeats, or which one this is
    ScheduledTrial trial = {};
};

/// The i-th of n places spread evenly, moved at random within its share.
double spread(int i, int n, Random& random) {
    return (i + random.uniform()) / n;
}

/// True and false, two of each in every four, in shuffled order.
class BalancedSides {
public:
    explicit BalancedSides(Random& random) : random_(random) {}
    bool next() {
        if (left_.empty()) {
            left_ = {true, true, false, false};
            for (std::size_t n = left_.size(); n > 1; --n)
                std::swap(left_[n - 1], left_[random_.below(n)]);
        }
        const bool side = left_.back();
        left_.pop_back();
        return side;
    }

private:
    Random& random_;
    std::vector<char> left_;
};

void swapSides(ScheduledTrial& trial) {
    std::swap(trial.left, trial.right);
    if (trial.expected != Side::None)
        trial.expected = trial.expected == Side::Left ? Side::Right : Side::Left;
}

std::vector<Wish> heldOutWishes(const Protocol& protocol, Random& random) {
    const auto& motions = protocol.table.motions;
    std::set<std::pair<std::size_t, std::size_t>> taken;
    std::vector<Wish> wishes;
    for (int i = 0; i < protocol.trials.heldOut; ++i) {
        std::size_t a = 0, b = 0;
        do {
            a = random.below(motions.size());
            b = random.below(motions.size());
            if (a > b)
                std::swap(a, b);
        } while (a == b || !taken.insert({a, b}).second);
        Wish wish{.at = spread(i, protocol.trials.heldOut, random), .heldOut = i};
        wish.trial = {.kind = TrialKind::HeldOut, .left = motions[a], .right = motions[b]};
        wishes.push_back(std::move(wish));
    }
    return wishes;
}

/// Repeats of the held-out pairs that come early enough, taken evenly from them.
std::vector<Wish> repeatWishes(const Protocol& protocol, const std::vector<Wish>& heldOut, Random& random) {
    std::vector<Wish> wishes;
    const int wanted = std::min(protocol.trials.repeat, static_cast<int>(heldOut.size()));
    const int early = std::max(wanted, static_cast<int>(heldOut.size()) * 2 / 3);
    for (int i = 0; i < wanted; ++i) {
        const int source = i * early / wanted;
        const Wish& first = heldOut[static_cast<std::size_t>(source)];
        Wish wish{.at = first.at + (1 - first.at) * (0.4 + 0.55 * random.uniform()), .heldOut = source};
        wish.trial = first.trial;
        wish.trial.kind = TrialKind::Repeat;
        wishes.push_back(std::move(wish));
    }
    return wishes;
}

std::vector<Wish> catchWishes(const Protocol& protocol, Random& random) {
    std::vector<Wish> wishes;
    std::vector<std::size_t> order(protocol.catchPairs.size());
    for (std::size_t i = 0; i < order.size(); ++i)
        order[i] = i;
    random.shuffle(std::span<std::size_t>(order));
    BalancedSides sides(random);
    for (int i = 0; i < protocol.trials.catchTrials && !order.empty(); ++i) {
        const CatchPair& pair = protocol.catchPairs[order[static_cast<std::size_t>(i) % order.size()]];
        Wish wish{.at = spread(i, protocol.trials.catchTrials, random)};
        wish.trial = {
            .kind = TrialKind::Catch, .left = pair.better, .right = pair.worse, .expected = Side::Left};
        if (!sides.next())
            swapSides(wish.trial);
        wishes.push_back(std::move(wish));
    }
    return wishes;
}

std::vector<Wish> identicalWishes(const Protocol& protocol, Random& random) {
    std::vector<Wish> wishes;
    for (int i = 0; i < protocol.trials.identical; ++i) {
        const std::string& motion = protocol.table.motions[random.below(protocol.table.motions.size())];
        Wish wish{.at = 0.5 + 0.5 * spread(i, protocol.trials.identical, random)};
        wish.trial = {.kind = TrialKind::Identical, .left = motion, .right = motion};
        wishes.push_back(std::move(wish));
    }
    return wishes;
}

/// Moves repeats that stand too close behind the pair they repeat towards the end, as far as there is room.
void keepRepeatsApart(std::vector<Wish>& wishes) {
    // At the very end two repeats may want the same place: as many rounds as trials settle all others.
    bool moved = true;
    for (std::size_t round = 0; moved && round < wishes.size(); ++round) {
        moved = false;
        for (std::size_t i = 0; i + 1 < wishes.size() && !moved; ++i) {
            if (wishes[i].trial.kind != TrialKind::Repeat)
                continue;
            std::size_t first = wishes.size();
            for (std::size_t j = 0; j < wishes.size(); ++j)
                if (wishes[j].trial.kind == TrialKind::HeldOut && wishes[j].heldOut == wishes[i].heldOut)
                    first = j;
            if (i > first && i - first >= kRepeatDistance)
                continue;
            const std::size_t target = std::min(first + kRepeatDistance, wishes.size() - 1);
            if (target <= i)
                continue;
            std::rotate(wishes.begin() + static_cast<std::ptrdiff_t>(i),
                        wishes.begin() + static_cast<std::ptrdiff_t>(i) + 1,
                        wishes.begin() + static_cast<std::ptrdiff_t>(target) + 1);
            moved = true;
        }
    }
}

} // namespace

Result<std::vector<ScheduledTrial>> drawSchedule(const Protocol& protocol, std::uint64_t seed) {
    const std::size_t n = protocol.table.motions.size();
    const std::size_t pairs = n * (n - 1) / 2;
    if (n < 2 || static_cast<std::size_t>(protocol.trials.heldOut) * 2 > pairs)
        return Error{.code = "session.schedule",
                     .place = {},
                     .message = "The library has " + std::to_string(pairs) + " pairs, too few for " +
                                std::to_string(protocol.trials.heldOut) + " held-out trials.",
                     .remedy = "Add motions, or lower held_out in study.toml to half the pairs or fewer.",
                     .values = {std::to_string(pairs), std::to_string(protocol.trials.heldOut)}};
    Random random(deriveSeed(seed, 1));

    std::vector<Wish> wishes = heldOutWishes(protocol, random);
    const std::vector<Wish> repeats = repeatWishes(protocol, wishes, random);
    const std::vector<Wish> catches = catchWishes(protocol, random);
    const std::vector<Wish> identicals = identicalWishes(protocol, random);
    for (const auto* more : {&repeats, &catches, &identicals})
        wishes.insert(wishes.end(), more->begin(), more->end());
    for (int i = 0; i < protocol.trials.main; ++i)
        wishes.push_back({.at = (i + 0.5) / protocol.trials.main, .heldOut = -1, .trial = {}});
    std::stable_sort(wishes.begin(), wishes.end(), [](const Wish& a, const Wish& b) { return a.at < b.at; });
    keepRepeatsApart(wishes);

    std::vector<ScheduledTrial> schedule;
    for (int i = 0; i < protocol.trials.practice && !protocol.practicePairs.empty(); ++i) {
        const auto& pair =
            protocol.practicePairs[static_cast<std::size_t>(i) % protocol.practicePairs.size()];
        schedule.push_back({.kind = TrialKind::Practice, .left = pair.left, .right = pair.right});
    }
    BalancedSides sides(random);
    std::vector<int> numberOfHeldOut(static_cast<std::size_t>(protocol.trials.heldOut));
    for (Wish& wish : wishes) {
        ScheduledTrial trial = wish.trial;
        if (trial.kind == TrialKind::Main || trial.kind == TrialKind::HeldOut) {
            trial.lowerLeft = sides.next();
            if (trial.kind == TrialKind::HeldOut && !trial.lowerLeft)
                swapSides(trial);
        }
        const int number = static_cast<int>(schedule.size()) + 1;
        if (trial.kind == TrialKind::HeldOut)
            numberOfHeldOut[static_cast<std::size_t>(wish.heldOut)] = number;
        if (trial.kind == TrialKind::Repeat) {
            trial.repeatOf = numberOfHeldOut[static_cast<std::size_t>(wish.heldOut)];
            const ScheduledTrial& first = schedule[static_cast<std::size_t>(trial.repeatOf - 1)];
            trial.left = first.right;
            trial.right = first.left;
            trial.lowerLeft = !first.lowerLeft;
        }
        schedule.push_back(std::move(trial));
    }
    return schedule;
}

} // namespace whichway
