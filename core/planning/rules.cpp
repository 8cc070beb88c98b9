// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/planning/rules.h"

#include <algorithm>
#include <cmath>
#include <stdexcept>

namespace whichway {
namespace {

/// Two motions are near-identical when no feature differs by more, in standard deviations of the library.
constexpr double kNearIdentical = 0.1;

} // namespace

PairRules::PairRules(const PlanningProblem& problem, const PlanRequest& request)
    : problem_(problem), motions_(problem.features.rows), taken_(motions_ * motions_, 0), uses_(motions_, 0),
      mostUses_(std::max(1, problem.mainTrials / 5)) {
    const auto check = [&](Pair pair) {
        if (pair.left < 0 || pair.right < 0 || pair.left == pair.right ||
            pair.left >= static_cast<int>(motions_) || pair.right >= static_cast<int>(motions_))
            throw std::invalid_argument("makePlan: a pair is out of range");
        return pair.canonical();
    };
    const auto take = [&](Pair pair) {
        taken_[static_cast<std::size_t>(pair.left) * motions_ + static_cast<std::size_t>(pair.right)] = 1;
    };
    const auto use = [&](Pair pair) {
        ++uses_[static_cast<std::size_t>(pair.left)];
        ++uses_[static_cast<std::size_t>(pair.right)];
    };
    for (const AnsweredPair& answered : request.answered) {
        const Pair pair = check(answered.pair);
        take(pair);
        use(pair);
        asked_.push_back(pair);
    }
    for (const Pair& pending : request.pending) {
        const Pair pair = check(pending);
        take(pair);
        use(pair);
        asked_.push_back(pair);
        open_.push_back(pair);
    }
    for (const Pair& reserved : request.reserved)
        take(check(reserved));
}

bool PairRules::relax() {
    if (relaxation_ == Relaxation::NearIdentical)
        return false;
    relaxation_ = static_cast<Relaxation>(static_cast<int>(relaxation_) + 1);
    return true;
}

std::vector<std::string> PairRules::relaxed() const {
    static const char* const kWords[] = {"pairs almost parallel to one that is still open were allowed",
                                         "pairs much like one asked before were allowed",
                                         "a motion was allowed in more than a fifth of the pairs",
                                         "pairs of near-identical motions were allowed"};
    return {kWords, kWords + static_cast<int>(relaxation_)};
}

bool PairRules::alike(int a, int b) const {
    const auto x = problem_.features.row(static_cast<std::size_t>(a));
    const auto y = problem_.features.row(static_cast<std::size_t>(b));
    for (std::size_t j = 0; j < x.size(); ++j)
        if (std::abs(x[j] - y[j]) > kNearIdentical)
            return false;
    return true;
}

bool PairRules::allows(int lower, int higher) const {
    const auto a = static_cast<std::size_t>(lower), b = static_cast<std::size_t>(higher);
    if (taken_[a * motions_ + b])
        return false;
    if (relaxation_ < Relaxation::Usage && (uses_[a] >= mostUses_ || uses_[b] >= mostUses_))
        return false;
    return relaxation_ >= Relaxation::NearIdentical || !alike(lower, higher);
}

bool PairRules::isNew(Pair pair) const {
    if (relaxation_ >= Relaxation::LikeAsked)
        return true;
    return std::none_of(asked_.begin(), asked_.end(), [&](const Pair& asked) {
        return (alike(pair.left, asked.left) && alike(pair.right, asked.right)) ||
               (alike(pair.left, asked.right) && alike(pair.right, asked.left));
    });
}

void PairRules::pick(Pair pair) {
    taken_[static_cast<std::size_t>(pair.left) * motions_ + static_cast<std::size_t>(pair.right)] = 1;
    ++uses_[static_cast<std::size_t>(pair.left)];
    ++uses_[static_cast<std::size_t>(pair.right)];
    asked_.push_back(pair);
    open_.push_back(pair);
}

} // namespace whichway
