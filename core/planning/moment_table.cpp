// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/planning/moment_table.h"

#include "core/numbers/special_functions.h"

#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

constexpr std::size_t kNodes = 16; ///< equally likely values of eta: good enough to screen by
constexpr std::size_t kCutDraws = 4;

} // namespace

MomentTable::MomentTable(const ResponseModel& model, const Matrix& cutDraws, double largestMean,
                         double largestDeviation)
    : values_(static_cast<std::size_t>(kPoints) * kPoints) {
    const double meanStep = std::max(largestMean, 1e-6) / (kPoints - 1);
    const double deviationStep = std::max(largestDeviation, 1e-6) / (kPoints - 1);
    perMean_ = static_cast<float>(1 / meanStep);
    perDeviation_ = static_cast<float>(1 / deviationStep);
    double nodes[kNodes];
    for (std::size_t q = 0; q < kNodes; ++q)
        nodes[q] = normalQuantile((static_cast<double>(q) + 0.5) / kNodes);
    const std::vector<int> answers = answersOf(model);
    const std::size_t used = std::min(kCutDraws, cutDraws.rows);
    std::vector<double> mean(answers.size());
    for (int i = 0; i < kPoints; ++i)
        for (int j = 0; j < kPoints; ++j) {
            std::fill(mean.begin(), mean.end(), 0.0);
            double entropy = 0;
            for (std::size_t draw = 0; draw < used; ++draw) {
                const auto cuts = cutDraws.row(draw * (cutDraws.rows / used));
                for (const double node : nodes) {
                    const double eta = i * meanStep + j * deviationStep * node;
                    for (std::size_t c = 0; c < answers.size(); ++c) {
                        const double p = std::max(responseProbability(model, eta, cuts, answers[c]), 1e-14);
                        mean[c] += p / static_cast<double>(kNodes * used);
                        entropy -= p * exactLog(p) / static_cast<double>(kNodes * used);
                    }
                }
            }
            double entropyOfMean = 0;
            for (const double p : mean)
                entropyOfMean -= p * exactLog(p);
            values_[static_cast<std::size_t>(i * kPoints + j)] =
                static_cast<float>((entropyOfMean - entropy) * 1.4426950408889634);
        }
}

} // namespace whichway
