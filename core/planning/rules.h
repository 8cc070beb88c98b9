// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/planning/plan.h"

#include <span>
#include <string>
#include <vector>

namespace whichway {

/// The hard rules of planning. Those that may give way do so one after another, in the order of `Relaxation`,
/// and only when no pair is left.
class PairRules {
public:
    enum class Relaxation { None, Parallel, LikeAsked, Usage, NearIdentical };
    static constexpr int kRelaxations = 4;

    PairRules(const PlanningProblem& problem, const PlanRequest& request);

    Relaxation relaxation() const { return relaxation_; }
    /// Lets the next rule give way. @return false if there is none left.
    bool relax();
    /// What gave way, in plain words.
    std::vector<std::string> relaxed() const;

    /// Rules that need only the pair (canonical): never asked, pending, reserved or picked; its motions not
    /// used too often; not near-identical.
    bool allows(int lower, int higher) const;
    /// The dearer rule: its two motions do not nearly duplicate an asked pair's.
    bool isNew(Pair pair) const;
    /// From now on the pair counts as pending.
    void pick(Pair pair);
    /// Pairs that the next one must not be parallel to, as long as that rule holds.
    std::span<const Pair> open() const { return open_; }

private:
    bool alike(int a, int b) const;

    const PlanningProblem& problem_;
    std::size_t motions_;
    Relaxation relaxation_ = Relaxation::None;
    std::vector<char> taken_; ///< motions x motions
    std::vector<int> uses_;
    int mostUses_ = 0;
    std::vector<Pair> asked_, open_;
};

} // namespace whichway
