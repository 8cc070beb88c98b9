// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/planning/information.h"

#include "core/numbers/exp_log.h"
#include "core/random.h"

#include <algorithm>
#include <stdexcept>

namespace whichway {
namespace {

constexpr double kBitsPerNat = 1.4426950408889634;
/// Draws scored together: small enough for the stack and the nearest cache.
constexpr std::size_t kBlock = 64;
constexpr std::size_t kMostCategories = 15;
constexpr std::size_t kMostContexts = 49;
constexpr std::size_t kLanes = 8;

/// Sum of a_m b_m in a fixed order that vectorises: eight sums side by side, added up at the end.
double laneDot(const double* a, const double* b, std::size_t count) {
    double lanes[kLanes] = {};
    std::size_t m = 0;
    for (; m + kLanes <= count; m += kLanes)
        for (std::size_t lane = 0; lane < kLanes; ++lane)
            lanes[lane] += a[m + lane] * b[m + lane];
    for (std::size_t lane = 0; m < count; ++m, ++lane)
        lanes[lane] += a[m] * b[m];
    return ((lanes[0] + lanes[1]) + (lanes[2] + lanes[3])) + ((lanes[4] + lanes[5]) + (lanes[6] + lanes[7]));
}

double minusXLogX(double x) {
    return x > 1e-300 ? -x * exactLog(x) : 0.0;
}

} // namespace

InformationScorer::InformationScorer(const ResponseModel& model, const Draws& draws)
    : model_(model), drawWeights_(draws.weights.columns, draws.count()), sideBias_(draws.sideBias),
      cutFactors_(static_cast<std::size_t>(model.levels), draws.count()), contexts_(1, draws.count()) {
    const std::size_t n = draws.count();
    if (n == 0 || draws.weights.columns != static_cast<std::size_t>(model.dimension) ||
        sideBias_.size() != n || draws.cuts.columns != static_cast<std::size_t>(model.levels) ||
        draws.cuts.rows != n || model.categories() > static_cast<int>(kMostCategories))
        throw std::invalid_argument("InformationScorer: the draws do not fit the model");
    for (std::size_t m = 0; m < n; ++m) {
        for (std::size_t j = 0; j < drawWeights_.rows; ++j)
            drawWeights_(j, m) = draws.weights(m, j);
        for (std::size_t k = 0; k < cutFactors_.rows; ++k)
            cutFactors_(k, m) = exactExp(draws.cuts(m, k));
        contexts_(0, m) = 1.0 / static_cast<double>(n);
    }
}

void InformationScorer::block(std::span<const double> difference, std::size_t first, std::size_t count,
                              double* p) const {
    const auto levels = static_cast<std::size_t>(model_.levels);
    const auto categories = static_cast<std::size_t>(model_.categories());
    const double floorPart = model_.lapse / model_.categories(), kept = 1.0 - model_.lapse;
    double eta[kBlock], odds[kBlock], above[kBlock], next[kBlock];
    std::copy_n(sideBias_.data() + first, count, eta);
    for (std::size_t j = 0; j < drawWeights_.rows; ++j) {
        const double* const row = drawWeights_.row(j).data() + first;
        const double factor = difference[j];
        for (std::size_t m = 0; m < count; ++m)
            eta[m] += factor * row[m];
    }
    for (const int side : {1, -1}) {
        // With t = e^{-side eta}: P(at least level k + 1 on that side) = 1 / (1 + t e^{c_k}).
        for (std::size_t m = 0; m < count; ++m)
            odds[m] = exactExp(side > 0 ? -eta[m] : eta[m]);
        const double* factor = cutFactors_.row(0).data() + first;
        for (std::size_t m = 0; m < count; ++m)
            above[m] = 1.0 / (1.0 + odds[m] * factor[m]);
        for (std::size_t k = 0; k < levels; ++k) {
            if (k + 1 < levels) {
                factor = cutFactors_.row(k + 1).data() + first;
                for (std::size_t m = 0; m < count; ++m)
                    next[m] = 1.0 / (1.0 + odds[m] * factor[m]);
            } else {
                std::fill(next, next + count, 0.0);
            }
            const std::size_t category = side > 0 ? categories - levels + k : levels - 1 - k;
            double* const out = p + category * kBlock;
            for (std::size_t m = 0; m < count; ++m) {
                out[m] = floorPart + kept * (above[m] - next[m]);
                above[m] = next[m];
            }
        }
    }
    if (model_.cannotTell) {
        double* const out = p + levels * kBlock;
        std::fill(out, out + count, 1.0);
        for (std::size_t c = 0; c < categories; ++c)
            if (c != levels)
                for (std::size_t m = 0; m < count; ++m)
                    out[m] -= p[c * kBlock + m];
    }
    for (std::size_t c = 0; c < categories; ++c)
        for (std::size_t m = 0; m < count; ++m) {
            double& value = p[c * kBlock + m];
            value = value < 1e-14 ? 1e-14 : value;
        }
}

double InformationScorer::information(std::span<const double> difference, std::size_t drawCount) const {
    const auto categories = static_cast<std::size_t>(model_.categories());
    const std::size_t total = std::min(drawCount, draws());
    double p[kMostCategories * kBlock], entropy[kBlock];
    double joint[kMostContexts][kMostCategories] = {};
    double mass[kMostContexts] = {};
    double meanEntropy = 0;
    for (std::size_t first = 0; first < total; first += kBlock) {
        const std::size_t count = std::min(kBlock, total - first);
        block(difference, first, count, p);
        std::fill(entropy, entropy + count, 0.0);
        for (std::size_t c = 0; c < categories; ++c) {
            const double* const row = p + c * kBlock;
            for (std::size_t m = 0; m < count; ++m)
                entropy[m] -= row[m] * exactLog(row[m]);
        }
        for (std::size_t s = 0; s < contexts_.rows; ++s) {
            const double* const weights = contexts_.row(s).data() + first;
            for (std::size_t c = 0; c < categories; ++c)
                joint[s][c] += laneDot(weights, p + c * kBlock, count);
            meanEntropy += laneDot(weights, entropy, count);
        }
    }
    double all = 0;
    for (std::size_t s = 0; s < contexts_.rows; ++s) {
        for (std::size_t c = 0; c < categories; ++c)
            mass[s] += joint[s][c];
        all += mass[s];
    }
    double entropyOfMeans = 0;
    for (std::size_t s = 0; s < contexts_.rows; ++s) {
        for (std::size_t c = 0; c < categories; ++c)
            entropyOfMeans += minusXLogX(joint[s][c]);
        entropyOfMeans -= minusXLogX(mass[s]);
    }
    return (entropyOfMeans - meanEntropy) / all * kBitsPerNat;
}

Matrix InformationScorer::probabilities(std::span<const double> difference) const {
    const auto categories = static_cast<std::size_t>(model_.categories());
    Matrix all(categories, draws());
    double p[kMostCategories * kBlock];
    for (std::size_t first = 0; first < draws(); first += kBlock) {
        const std::size_t count = std::min(kBlock, draws() - first);
        block(difference, first, count, p);
        for (std::size_t c = 0; c < categories; ++c)
            std::copy_n(p + c * kBlock, count, all.row(c).data() + first);
    }
    return all;
}

void InformationScorer::condition(std::span<const double> difference, std::uint64_t seed) {
    const auto categories = static_cast<std::size_t>(model_.categories());
    const std::size_t n = draws();
    open_.push_back(probabilities(difference));
    std::size_t combinations = 1;
    for (std::size_t i = 0; i < open_.size() && combinations <= kMostContexts; ++i)
        combinations *= categories;
    if (combinations <= kMostContexts) {
        Matrix finer(contexts_.rows * categories, n);
        for (std::size_t s = 0; s < contexts_.rows; ++s)
            for (std::size_t c = 0; c < categories; ++c)
                for (std::size_t m = 0; m < n; ++m)
                    finer(s * categories + c, m) = contexts_(s, m) * open_.back()(c, m);
        contexts_ = std::move(finer);
        return;
    }
    Random random(seed);
    Matrix drawn(kMostContexts, n);
    for (std::size_t s = 0; s < drawn.rows; ++s) {
        const std::size_t truth = random.below(n);
        std::fill(drawn.row(s).begin(), drawn.row(s).end(), 1.0);
        for (const Matrix& open : open_) {
            double left = random.uniform();
            std::size_t answer = 0;
            while (answer + 1 < categories && left > open(answer, truth))
                left -= open(answer++, truth);
            for (std::size_t m = 0; m < n; ++m)
                drawn(s, m) *= open(answer, m);
        }
        double sum = 0;
        for (const double weight : drawn.row(s))
            sum += weight;
        for (double& weight : drawn.row(s))
            weight /= sum * static_cast<double>(drawn.rows);
    }
    contexts_ = std::move(drawn);
}

} // namespace whichway
