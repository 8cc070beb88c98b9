// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/planning/plan.h"

#include "core/planning/belief.h"
#include "core/planning/information.h"
#include "core/planning/rules.h"
#include "core/preference/posterior.h"
#include "core/random.h"

#include <algorithm>
#include <ctime>
#include <optional>
#include <stdexcept>

namespace whichway {
namespace {

constexpr int kChains = 4;
constexpr int kDrawsPerChain = 256;
constexpr std::size_t kScreened = 2048;    ///< pairs of the first pick that are scored on draws
constexpr std::size_t kScreenedLater = 96; ///< of a later pick: it will mostly be planned again
constexpr std::size_t kFirstDraws = 256;   ///< draws of the first, coarse scoring
constexpr std::size_t kScoredFully = 64;   ///< pairs scored on all draws after that
constexpr double kParallel = 0.98;
constexpr int kMostBeforeAnswers = 5;

double threadSeconds() {
    timespec now{};
    clock_gettime(CLOCK_THREAD_CPUTIME_ID, &now);
    return static_cast<double>(now.tv_sec) + 1e-9 * static_cast<double>(now.tv_nsec);
}

Error cancelled() {
    return {.code = kCancelled, .place = {}, .message = "Stopped.", .remedy = ""};
}

std::vector<double> differenceOf(const PlanningProblem& problem, Pair pair) {
    const auto a = problem.features.row(static_cast<std::size_t>(pair.left));
    const auto b = problem.features.row(static_cast<std::size_t>(pair.right));
    std::vector<double> difference(a.size());
    for (std::size_t j = 0; j < a.size(); ++j)
        difference[j] = a[j] - b[j];
    return difference;
}

/// Draws with the chains taken in turn, so that the first few are as good a sample as all.
Draws interleaved(const Draws& draws, int chains) {
    const auto count = static_cast<std::size_t>(chains);
    const std::size_t each = draws.count() / count;
    Draws mixed{.weights = Matrix(each * count, draws.weights.columns),
                .sideBias = std::vector<double>(each * count),
                .cuts = Matrix(each * count, draws.cuts.columns)};
    for (std::size_t m = 0; m < each * count; ++m) {
        const std::size_t from = (m % count) * each + m / count;
        std::copy_n(draws.weights.row(from).begin(), draws.weights.columns, mixed.weights.row(m).begin());
        std::copy_n(draws.cuts.row(from).begin(), draws.cuts.columns, mixed.cuts.row(m).begin());
        mixed.sideBias[m] = draws.sideBias[from];
    }
    return mixed;
}

class PlanMaker {
public:
    PlanMaker(const PlanningProblem& problem, const PlanRequest& request, std::stop_token stop)
        : problem_(problem), request_(request), stop_(std::move(stop)), rules_(problem, request) {}

    Result<Plan> make() {
        const double start = threadSeconds();
        const auto draws = drawsFor(1, kDrawsPerChain);
        if (!draws)
            return draws.error();
        const auto fresh = drawsFor(2, kDrawsPerChain / 2);
        if (!fresh)
            return fresh.error();
        InformationScorer scorer(problem_.model, *draws), report(problem_.model, *fresh);
        Belief belief(problem_, *draws);
        for (const Pair& pending : request_.pending)
            expect(pending, scorer, report, belief);

        Plan plan{.request = request_.id};
        int batch = request_.batch;
        if (request_.answered.empty() && request_.pending.empty())
            batch = std::min(batch, kMostBeforeAnswers);
        while (static_cast<int>(plan.pairs.size()) < batch) {
            if (stop_.stop_requested())
                return cancelled();
            const bool last = static_cast<int>(plan.pairs.size()) + 1 == batch;
            const std::optional<Pair> pick = problem_.settings.choose == "at random"
                                                 ? pickAtRandom(plan.pairs.size())
                                                 : pickInformative(scorer, belief, plan.pairs.empty());
            if (stop_.stop_requested())
                return cancelled();
            if (!pick)
                break;
            plan.pairs.push_back(
                {.pair = *pick, .information = report.information(differenceOf(problem_, *pick))});
            rules_.pick(*pick);
            if (!last)
                expect(*pick, scorer, report, belief);
        }
        if (plan.pairs.empty())
            return Error{.code = "planning.no-pair",
                         .place = {},
                         .message = "The library holds no pair that may still be asked.",
                         .remedy = "Add motions, or lower the number of main trials."};
        plan.relaxed = rules_.relaxed();
        plan.seconds = threadSeconds() - start;
        return plan;
    }

private:
    Result<Draws> drawsFor(std::uint64_t part, int perChain) const {
        const std::uint64_t seed = deriveSeed(request_.seed, part);
        if (request_.answered.empty())
            return drawPrior(problem_.model, kChains * perChain, seed);
        std::vector<Response> responses;
        for (const AnsweredPair& answered : request_.answered)
            responses.push_back(
                {.difference = differenceOf(problem_, answered.pair), .answer = answered.answer});
        auto posterior = samplePosterior(
            problem_.model, responses,
            {.chains = kChains, .warmUp = 40, .drawsPerChain = perChain, .seed = seed, .diagnose = false},
            stop_);
        if (!posterior)
            return posterior.error();
        return interleaved(posterior->draws, kChains);
    }

    void expect(Pair pair, InformationScorer& scorer, InformationScorer& report, Belief& belief) {
        const std::vector<double> difference = differenceOf(problem_, pair);
        scorer.condition(difference, deriveSeed(request_.seed, 10 + opened_));
        report.condition(difference, deriveSeed(request_.seed, 1000 + opened_));
        belief.expectAnswer(pair.canonical());
        ++opened_;
    }

    std::optional<Pair> pickInformative(const InformationScorer& scorer, const Belief& belief, bool first) {
        do {
            std::vector<ScreenedPair> candidates = belief.screen(rules_, first ? kScreened : kScreenedLater);
            std::erase_if(candidates, [&](const ScreenedPair& candidate) {
                return !rules_.isNew(candidate.pair) || isParallel(candidate.pair, belief);
            });
            if (!candidates.empty())
                return best(candidates, scorer, first);
        } while (rules_.relax());
        return std::nullopt;
    }

    bool isParallel(Pair pair, const Belief& belief) const {
        if (rules_.relaxation() >= PairRules::Relaxation::Parallel)
            return false;
        return std::any_of(rules_.open().begin(), rules_.open().end(),
                           [&](const Pair& open) { return belief.alignment(pair, open) > kParallel; });
    }

    Pair best(std::vector<ScreenedPair>& candidates, const InformationScorer& scorer, bool first) const {
        const auto better = [](const ScreenedPair& a, const ScreenedPair& b) {
            return a.score != b.score ? a.score > b.score : a.pair < b.pair;
        };
        const auto score = [&](std::size_t count, std::size_t draws) {
            for (std::size_t i = 0; i < count && !(i % 64 == 0 && stop_.stop_requested()); ++i)
                candidates[i].score =
                    static_cast<float>(scorer.information(differenceOf(problem_, candidates[i].pair), draws));
            std::sort(candidates.begin(), candidates.begin() + static_cast<std::ptrdiff_t>(count), better);
        };
        score(candidates.size(), kFirstDraws);
        if (first)
            score(std::min(candidates.size(), kScoredFully), scorer.draws());
        return candidates.front().pair;
    }

    std::optional<Pair> pickAtRandom(std::size_t part) {
        Random random(deriveSeed(request_.seed, 5000 + part));
        const auto n = static_cast<int>(problem_.features.rows);
        do {
            std::vector<Pair> allowed;
            for (int i = 0; i < n; ++i)
                for (int j = i + 1; j < n; ++j)
                    if (rules_.allows(i, j) && rules_.isNew({i, j}))
                        allowed.push_back({i, j});
            if (!allowed.empty())
                return allowed[random.below(allowed.size())];
        } while (rules_.relax());
        return std::nullopt;
    }

    const PlanningProblem& problem_;
    const PlanRequest& request_;
    std::stop_token stop_;
    PairRules rules_;
    std::uint64_t opened_ = 0;
};

} // namespace

bool Plan::operator==(const Plan& other) const {
    return request == other.request && pairs == other.pairs && relaxed == other.relaxed;
}

Result<Plan> makePlan(const PlanningProblem& problem, const PlanRequest& request, std::stop_token stop) {
    if (problem.features.columns != static_cast<std::size_t>(problem.model.dimension))
        throw std::invalid_argument("makePlan: the model does not fit the features");
    if (request.batch < 1)
        throw std::invalid_argument("makePlan: a batch holds at least one pair");
    return PlanMaker(problem, request, std::move(stop)).make();
}

} // namespace whichway
