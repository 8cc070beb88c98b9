// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/likelihood.h"

#include "core/numbers/exp_log.h"

#include <algorithm>
#include <cmath>
#include <stdexcept>

namespace whichway {
namespace {

/// Stands for an infinite cut point: e^-kBeyond is as good as 0 and nothing overflows.
constexpr double kBeyond = 1e4;
constexpr double kSmallestProbability = 1e-300;

double logisticOf(double x) {
    const double t = exactExp(x < 0 ? x : -x);
    return (x < 0 ? t : 1.0) / (1.0 + t);
}

} // namespace

ResponseLikelihood::ResponseLikelihood(const ResponseModel& model, std::span<const Response> responses)
    : model_(model), count_(responses.size()) {
    if (model.dimension < 1 || model.levels < 1 || model.levels > 7 ||
        !(model.lapse >= 0 && model.lapse <= 0.2))
        throw std::invalid_argument("ResponseLikelihood: the model is out of range");
    const auto d = static_cast<std::size_t>(model.dimension), k = static_cast<std::size_t>(model.levels);
    signed_.resize((d + 1) * count_);
    byResponse_.resize((d + 1) * count_);
    for (std::size_t i = 0; i < count_; ++i) {
        const Response& response = responses[i];
        const auto level = static_cast<std::size_t>(std::abs(response.answer));
        if (response.difference.size() != d || level > k || (level == 0 && !model.cannotTell))
            throw std::invalid_argument("ResponseLikelihood: a response does not fit the model");
        const double side = response.answer < 0 ? -1.0 : 1.0;
        for (std::size_t j = 0; j <= d; ++j) {
            const double value = j < d ? response.difference[j] : 1.0;
            if (!std::isfinite(value))
                throw std::invalid_argument("ResponseLikelihood: a difference is not finite");
            signed_[j * count_ + i] = byResponse_[i * (d + 1) + j] = side * value;
        }
        // Extended cuts: c_0 … c_{K-1}, "beyond" at K, -c_0 at K + 1. "Cannot tell" lies between -c_0 and
        // c_0.
        lowerCut_.push_back(level == 0 ? k + 1 : level - 1);
        upperCut_.push_back(level == 0 ? 0 : level);
    }
    const double least = model.lapse / model.categories();
    perLog_ = least > 1e-6 ? 32 : 1;
}

double ResponseLikelihood::evaluate(std::span<const double> natural, std::span<double> gradient,
                                    Scratch& scratch) const {
    const auto d = static_cast<std::size_t>(model_.dimension), k = static_cast<std::size_t>(model_.levels);
    const std::size_t n = count_;
    const double* const cuts = natural.data() + d + 1;
    double extended[9];
    for (std::size_t j = 0; j < k; ++j)
        extended[j] = cuts[j];
    extended[k] = kBeyond;
    extended[k + 1] = -cuts[0];

    for (auto* list :
         {&scratch.upper, &scratch.lower, &scratch.slopeUpper, &scratch.slopeLower, &scratch.probability})
        list->resize(n);
    double* const a = scratch.upper.data();
    double* const b = scratch.lower.data();
    double* const slopeA = scratch.slopeUpper.data();
    double* const slopeB = scratch.slopeLower.data();
    double* const p = scratch.probability.data();

    std::fill(a, a + n, 0.0);
    for (std::size_t j = 0; j <= d; ++j) {
        const double* const column = signed_.data() + j * n;
        const double weight = natural[j];
        for (std::size_t i = 0; i < n; ++i)
            a[i] += weight * column[i];
    }
    for (std::size_t i = 0; i < n; ++i) {
        b[i] = a[i] - extended[upperCut_[i]];
        a[i] -= extended[lowerCut_[i]];
    }

    // P_ord = S(a) - S(b) = S(a) S(-b) (1 - e^(b-a)), which does not cancel.
    const double floorPart = model_.lapse / model_.categories();
    const double kept = 1.0 - model_.lapse;
    for (std::size_t i = 0; i < n; ++i) {
        const double ta = exactExp(a[i] < 0 ? a[i] : -a[i]);
        const double tb = exactExp(b[i] < 0 ? b[i] : -b[i]);
        const double ia = 1.0 / (1.0 + ta);
        const double ib = 1.0 / (1.0 + tb);
        const double sa = (a[i] < 0 ? ta : 1.0) * ia;
        const double sbComplement = (b[i] < 0 ? 1.0 : tb) * ib;
        const double between = 1.0 - exactExp(b[i] - a[i]);
        const double ordinal = sa * sbComplement * between;
        const double total = floorPart + kept * ordinal;
        p[i] = total < kSmallestProbability ? kSmallestProbability : total;
        slopeA[i] = kept * ta * ia * ia / p[i];
        slopeB[i] = kept * tb * ib * ib / p[i];
    }

    double logLikelihood = 0;
    for (std::size_t i = 0; i < n;) {
        double product = 1;
        for (const std::size_t end = std::min(n, i + perLog_); i < end; ++i)
            product *= p[i];
        logLikelihood += exactLog(product);
    }

    double cutSlopes[9] = {};
    std::fill(gradient.begin(), gradient.end(), 0.0);
    for (std::size_t i = 0; i < n; ++i) {
        const double slope = slopeA[i] - slopeB[i];
        const double* const row = byResponse_.data() + i * (d + 1);
        for (std::size_t j = 0; j <= d; ++j)
            gradient[j] += slope * row[j];
        cutSlopes[lowerCut_[i]] -= slopeA[i];
        cutSlopes[upperCut_[i]] += slopeB[i];
    }
    for (std::size_t j = 0; j < k; ++j)
        gradient[d + 1 + j] = cutSlopes[j];
    gradient[d + 1] -= cutSlopes[k + 1];
    return logLikelihood;
}

Matrix ResponseLikelihood::expectedInformation(std::span<const double> natural) const {
    const auto d = static_cast<std::size_t>(model_.dimension), k = static_cast<std::size_t>(model_.levels);
    const std::size_t size = parameters();
    Matrix information(size, size);
    const double* const cuts = natural.data() + d + 1;
    const double kept = 1.0 - model_.lapse;
    const double floorPart = model_.lapse / model_.categories();
    std::vector<double> steps(
        k); // S(|eta| side): probability of at least level j + 1 on one side, and its slope
    Matrix small(k + 1, k + 1); // information of (eta, c_0 … c_{K-1}) in one answer
    std::vector<double> change(k + 1);

    for (std::size_t i = 0; i < count_; ++i) {
        const double* const row = byResponse_.data() + i * (d + 1);
        const double side = row[d];
        double eta = 0;
        for (std::size_t j = 0; j <= d; ++j)
            eta += natural[j] * row[j] * side;
        std::fill(small.values.begin(), small.values.end(), 0.0);
        const auto add = [&](double probability) {
            const double p = std::max(floorPart + kept * probability, 1e-12);
            for (std::size_t r = 0; r <= k; ++r)
                for (std::size_t c = 0; c <= k; ++c)
                    small(r, c) += kept * kept * change[r] * change[c] / p;
        };
        for (const double sign : {1.0, -1.0}) {
            for (std::size_t level = 0; level < k; ++level) {
                const double s = logisticOf(sign * eta - cuts[level]);
                const bool last = level + 1 == k;
                const double next = last ? 0.0 : logisticOf(sign * eta - cuts[level + 1]);
                std::fill(change.begin(), change.end(), 0.0);
                change[0] = sign * (s * (1 - s) - next * (1 - next));
                change[1 + level] = -s * (1 - s);
                if (!last)
                    change[2 + level] = next * (1 - next);
                add(s - next);
            }
        }
        if (model_.cannotTell) {
            const double high = logisticOf(eta + cuts[0]), low = logisticOf(eta - cuts[0]);
            std::fill(change.begin(), change.end(), 0.0);
            change[0] = high * (1 - high) - low * (1 - low);
            change[1] = high * (1 - high) + low * (1 - low);
            add(high - low);
        }
        for (std::size_t r = 0; r <= d; ++r) {
            const double x = row[r] * side;
            for (std::size_t c = 0; c <= r; ++c)
                information(r, c) += small(0, 0) * x * row[c] * side;
            for (std::size_t c = 0; c < k; ++c)
                information(d + 1 + c, r) += small(0, 1 + c) * x;
        }
        for (std::size_t r = 0; r < k; ++r)
            for (std::size_t c = 0; c <= r; ++c)
                information(d + 1 + r, d + 1 + c) += small(1 + r, 1 + c);
    }
    for (std::size_t r = 0; r < size; ++r)
        for (std::size_t c = r + 1; c < size; ++c)
            information(r, c) = information(c, r);
    return information;
}

} // namespace whichway
