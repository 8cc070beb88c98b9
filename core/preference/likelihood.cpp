// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/likelihood.h"

#include "core/numbers/exp_log.h"
#include "core/numbers/special_functions.h"

#include <algorithm>
#include <cmath>
#include <stdexcept>

namespace whichway {
namespace {

constexpr double kSmallestGap = 1e-300;

/// 1 - e^-g without cancellation.
double oneMinusExp(double g) {
    if (g > 0.02)
        return 1.0 - exactExp(-g);
    return g * (1 - g / 2 * (1 - g / 3 * (1 - g / 4 * (1 - g / 5 * (1 - g / 6)))));
}

/// Rows that a loop over the answers of one level reads and writes.
struct Rows {
    const double* __restrict eta;
    double* __restrict up;     ///< share * S(-a)
    double* __restrict down;   ///< share * S(b)
    double* __restrict share;  ///< of the ordinal part in P
    double* __restrict factor; ///< what is left to take the logarithm of
};

// With a = x - lower, b = x - upper: P_ord = S(a) - S(b) = S(a) S(-b) (1 - e^-g), which does not cancel, and
//     d ln P_ord / da = S(-a) + s,  d ln P_ord / db = -(S(b) + s),  s = d ln(1 - e^-g) / d g.
// A lapse multiplies both by the share of P_ord in P.

/// Beyond it S(x) is 0 or 1 to 65 digits, which under a lapse is all the same; e^4x does not overflow.
constexpr double kFar = 150;
/// Of the lapse's share of a category: less is no lapse.
constexpr double kLeastFloor = 1e-40;

double expWithin(double x) {
    x = x < -kFar ? -kFar : x;
    x = x > kFar ? kFar : x;
    return exactExp(x);
}

/// e^-eta of all answers: a loop of its own, because a short one keeps more exponentials in flight.
void exponentials(const double* __restrict eta, double* __restrict result, std::size_t size) {
    for (std::size_t i = 0; i < size; ++i)
        result[i] = expWithin(-eta[i]);
}

/// With a lapse: two divisions an answer; `share` comes in as e^-eta; `factor` is P.
template <bool kLast>
void evaluateLevel(const Rows& rows, std::size_t begin, std::size_t end, double lower, double upper,
                   double between, double floorPart, double kept) {
    const double timesLow = expWithin(lower), timesHigh = expWithin(upper), scale = kept * between;
    for (std::size_t i = begin; i < end; ++i) {
        const double t = rows.share[i];  // e^-eta
        const double low = t * timesLow; // e^-a
        const double high = kLast ? 0.0 : t * timesHigh;
        const double numerator = kLast ? kept : scale * high;
        const double denominator = (1.0 + low) * (1.0 + high);
        const double total = floorPart * denominator + numerator;
        const double inverse = 1.0 / denominator;
        const double share = numerator / total;
        rows.factor[i] = total * inverse;
        rows.share[i] = share;
        rows.up[i] = share * (low * (1.0 + high) * inverse);
        rows.down[i] = kLast ? 0.0 : share * ((1.0 + low) * inverse);
    }
}

/// Without a lapse ln P = min(a, 0) - max(b, 0) + ln(1 - e^-g) + ln factor. @return the sum of all but the
/// last.
template <bool kLast>
double evaluateLevelWithoutLapse(const Rows& rows, std::size_t begin, std::size_t end, double lower,
                                 double upper, double between) {
    for (std::size_t i = begin; i < end; ++i) {
        const double a = rows.eta[i] - lower;
        const double b = rows.eta[i] - upper;
        const double ta = exactExp(-std::abs(a));
        const double tb = kLast ? 0.0 : exactExp(-std::abs(b));
        const double ia = 1.0 / (1.0 + ta);
        const double ib = 1.0 / (1.0 + tb);
        rows.factor[i] = ia * ib;
        rows.share[i] = 1.0;
        rows.up[i] = (a < 0 ? 1.0 : ta) * ia;
        rows.down[i] = kLast ? 0.0 : (b < 0 ? tb : 1.0) * ib;
    }
    double sum = 0;
    for (std::size_t i = begin; i < end; ++i) {
        sum += std::min(rows.eta[i] - lower, 0.0);
        if (!kLast)
            sum -= std::max(rows.eta[i] - upper, 0.0);
    }
    return kLast ? sum : sum + static_cast<double>(end - begin) * exactLog(between);
}

struct LevelSums {
    double up = 0, down = 0, share = 0;
};

LevelSums sumLevel(const Rows& rows, std::size_t begin, std::size_t end) {
    LevelSums sums; // three sums in one loop: none waits for another
    for (std::size_t i = begin; i < end; ++i) {
        sums.up += rows.up[i];
        sums.down += rows.down[i];
        sums.share += rows.share[i];
    }
    return sums;
}

void multiply(const double* __restrict column, double factor, double* __restrict result, std::size_t size) {
    for (std::size_t i = 0; i < size; ++i)
        result[i] = factor * column[i];
}

void addTwo(const double* __restrict a, double factorA, const double* __restrict b, double factorB,
            double* __restrict result, std::size_t size) {
    for (std::size_t i = 0; i < size; ++i)
        result[i] = (result[i] + factorA * a[i]) + factorB * b[i];
}

/// Four sums side by side, so that the order is the same with and without vector instructions.
double dotByFours(const double* __restrict a, const double* __restrict b, std::size_t size) {
    double sums[4] = {0, 0, 0, 0};
    for (std::size_t i = 0; i < size; i += 4)
        for (std::size_t k = 0; k < 4; ++k)
            sums[k] += a[i + k] * b[i + k];
    return (sums[0] + sums[1]) + (sums[2] + sums[3]);
}

double productByFours(const double* __restrict a, std::size_t size) {
    double products[4] = {1, 1, 1, 1};
    for (std::size_t i = 0; i < size; i += 4)
        for (std::size_t k = 0; k < 4; ++k)
            products[k] *= a[i + k];
    return (products[0] * products[1]) * (products[2] * products[3]);
}

} // namespace

ResponseLikelihood::ResponseLikelihood(const ResponseModel& model, std::span<const Response> responses)
    : model_(model), count_(responses.size()), stride_((responses.size() + 3) / 4 * 4) {
    requireSound(model);
    const auto d = static_cast<std::size_t>(model.dimension), k = static_cast<std::size_t>(model.levels);
    for (const Response& response : responses) {
        const int level = std::abs(response.answer);
        if (response.difference.size() != d || level > model.levels || (level == 0 && !model.cannotTell))
            throw std::invalid_argument("ResponseLikelihood: a response does not fit the model");
        if (!std::all_of(response.difference.begin(), response.difference.end(),
                         [](double value) { return std::isfinite(value); }))
            throw std::invalid_argument("ResponseLikelihood: a difference is not finite");
    }
    signed_.resize((d + 1) * stride_);
    std::size_t next = 0;
    for (std::size_t level = 0; level <= k; ++level) {
        Group group{.level = level, .begin = next};
        for (const Response& response : responses) {
            if (static_cast<std::size_t>(std::abs(response.answer)) != level)
                continue;
            const double side = response.answer < 0 ? -1.0 : 1.0;
            for (std::size_t j = 0; j < d; ++j)
                signed_[j * stride_ + next] = side * response.difference[j];
            signed_[d * stride_ + next++] = side;
        }
        group.end = next;
        if (group.end > group.begin)
            groups_.push_back(group);
    }
    floorPart_ = model.lapse / model.categories();
    kept_ = 1.0 - model.lapse;
    mixture_ = floorPart_ > kLeastFloor;
    if (!mixture_) {
        floorPart_ = 0;
        kept_ = 1;
    } else if (floorPart_ < 1e-9) {
        perLog_ = 4;
    }
}

ResponseLikelihood::Step ResponseLikelihood::stepOf(std::size_t level, std::span<const double> cuts) const {
    Step step;
    if (level == 0) {
        step.upper = cuts[0];
        step.lower = -cuts[0];
    } else {
        step.lower = cuts[level - 1];
        if (isLast(level))
            return step;
        step.upper = cuts[level];
    }
    const double gap = std::max(step.upper - step.lower, kSmallestGap);
    step.between = oneMinusExp(gap);
    step.slope = exactExp(-gap) / step.between;
    return step;
}

double ResponseLikelihood::evaluate(std::span<const double> natural, std::span<double> gradient,
                                    Scratch& scratch) const {
    const auto d = static_cast<std::size_t>(model_.dimension), k = static_cast<std::size_t>(model_.levels);
    for (auto* list :
         {&scratch.eta, &scratch.up, &scratch.down, &scratch.share, &scratch.factor, &scratch.slope})
        list->resize(stride_);
    double* const __restrict eta = scratch.eta.data();
    const auto columnOf = [&](std::size_t j) { return signed_.data() + j * stride_; };
    multiply(columnOf(d), natural[d], eta, stride_);
    std::size_t done = 0;
    for (; done + 1 < d; done += 2)
        addTwo(columnOf(done), natural[done], columnOf(done + 1), natural[done + 1], eta, stride_);
    if (done < d)
        addTwo(columnOf(done), natural[done], columnOf(done), 0.0, eta, stride_);

    double logLikelihood = 0;
    std::fill(gradient.begin(), gradient.end(), 0.0);
    const std::span<const double> cuts = natural.subspan(d + 1, k);
    const Rows rows{.eta = eta,
                    .up = scratch.up.data(),
                    .down = scratch.down.data(),
                    .share = scratch.share.data(),
                    .factor = scratch.factor.data()};
    if (mixture_)
        exponentials(eta, scratch.share.data(), stride_);
    for (const Group& group : groups_) {
        const Step step = stepOf(group.level, cuts);
        const bool last = isLast(group.level);
        if (mixture_) {
            const auto kernel = last ? evaluateLevel<true> : evaluateLevel<false>;
            kernel(rows, group.begin, group.end, step.lower, step.upper, step.between, floorPart_, kept_);
        } else {
            const auto kernel = last ? evaluateLevelWithoutLapse<true> : evaluateLevelWithoutLapse<false>;
            logLikelihood += kernel(rows, group.begin, group.end, step.lower, step.upper, step.between);
        }
        const LevelSums sums = sumLevel(rows, group.begin, group.end);
        const double shared = step.slope * sums.share;
        if (group.level > 0)
            gradient[d + group.level] -= sums.up + shared;
        else // -c_0 is the lower cut of "cannot tell"
            gradient[d + 1] += sums.up + shared;
        if (!last)
            gradient[d + 1 + group.level] += sums.down + shared;
    }

    std::fill(scratch.factor.begin() + static_cast<std::ptrdiff_t>(count_), scratch.factor.end(), 1.0);
    for (std::size_t i = 0; i < stride_; i += perLog_)
        logLikelihood += exactLog(productByFours(scratch.factor.data() + i, std::min(perLog_, stride_ - i)));

    double* const slope = scratch.slope.data();
    for (std::size_t i = 0; i < count_; ++i)
        slope[i] = scratch.up[i] - scratch.down[i];
    std::fill(slope + count_, slope + stride_, 0.0);
    for (std::size_t j = 0; j <= d; ++j)
        gradient[j] = dotByFours(slope, signed_.data() + j * stride_, stride_);
    return logLikelihood;
}

Matrix ResponseLikelihood::expectedInformation(std::span<const double> natural) const {
    const auto d = static_cast<std::size_t>(model_.dimension), k = static_cast<std::size_t>(model_.levels);
    const std::size_t size = parameters();
    Matrix information(size, size);
    const double* const cuts = natural.data() + d + 1;
    Matrix small(k + 1, k + 1); // information of (eta, c_0 … c_{K-1}) in one answer
    std::vector<double> row(d + 1), above(k + 1), change(k + 1);
    above[k] = 0;

    for (std::size_t i = 0; i < count_; ++i) {
        const double side = signed_[d * stride_ + i];
        double eta = 0;
        for (std::size_t j = 0; j <= d; ++j) {
            row[j] = side * signed_[j * stride_ + i];
            eta += natural[j] * row[j];
        }
        std::fill(small.values.begin(), small.values.end(), 0.0);
        // P_ord of a category moves with eta, with the cut `first` and the next one.
        const auto add = [&](double probability, std::size_t first, bool two) {
            const double weight = kept_ * kept_ / std::max(floorPart_ + kept_ * probability, 1e-12);
            const std::size_t moved[3] = {0, first, first + 1};
            for (std::size_t r = 0; r < (two ? 3u : 2u); ++r)
                for (std::size_t c = 0; c <= r; ++c)
                    small(moved[r], moved[c]) += weight * change[moved[r]] * change[moved[c]];
        };
        for (const double sign : {1.0, -1.0}) {
            for (std::size_t level = 0; level < k; ++level)
                above[level] = logistic(sign * eta - cuts[level]); // at least level + 1 on this side
            for (std::size_t level = 0; level < k; ++level) {
                const double s = above[level] * (1 - above[level]);
                const double next = above[level + 1] * (1 - above[level + 1]);
                const bool two = level + 1 < k;
                change[0] = sign * (s - next);
                change[1 + level] = -s;
                if (two)
                    change[2 + level] = next;
                add(above[level] - above[level + 1], 1 + level, two);
            }
        }
        if (model_.cannotTell) {
            const double high = logistic(eta + cuts[0]), low = logistic(eta - cuts[0]);
            change[0] = high * (1 - high) - low * (1 - low);
            change[1] = high * (1 - high) + low * (1 - low);
            add(high - low, 1, false);
        }
        for (std::size_t r = 0; r <= d; ++r) {
            const double scaled = small(0, 0) * row[r];
            for (std::size_t c = 0; c <= r; ++c)
                information(r, c) += scaled * row[c];
            for (std::size_t c = 0; c < k; ++c)
                information(d + 1 + c, r) += small(1 + c, 0) * row[r];
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

Matrix ResponseLikelihood::observedInformation(std::span<const double> natural) const {
    const auto d = static_cast<std::size_t>(model_.dimension), k = static_cast<std::size_t>(model_.levels);
    const std::size_t size = parameters();
    Matrix information(size, size);
    // Each answer depends on a and b, linear in the parameters: the two rows of `moves`.
    std::vector<double> moves[2] = {std::vector<double>(size), std::vector<double>(size)};
    for (const Group& group : groups_) {
        const Step step = stepOf(group.level, natural.subspan(d + 1, k));
        const bool last = isLast(group.level);
        const double bend = step.slope * (1 + step.slope); // minus d^2 ln(1 - e^-g) / d g^2
        for (std::size_t i = group.begin; i < group.end; ++i) {
            double x = 0;
            for (auto& move : moves)
                std::fill(move.begin(), move.end(), 0.0);
            for (std::size_t j = 0; j <= d; ++j) {
                moves[0][j] = signed_[j * stride_ + i];
                moves[1][j] = last ? 0.0 : moves[0][j];
                x += natural[j] * moves[0][j];
            }
            moves[0][group.level > 0 ? d + group.level : d + 1] = group.level > 0 ? -1 : 1;
            if (!last)
                moves[1][d + 1 + group.level] = -1;

            const double sa = logistic(x - step.lower), notA = logistic(step.lower - x);
            const double sb = last ? 0.0 : logistic(x - step.upper);
            const double notB = last ? 1.0 : logistic(step.upper - x);
            double share = 1;
            if (mixture_) {
                const double ordinal = kept_ * step.between * sa * notB;
                share = ordinal / (floorPart_ + ordinal);
            }
            const double first[2] = {notA + step.slope, last ? 0.0 : -(sb + step.slope)};
            const double second[2][2] = {{-sa * notA - bend, bend}, {bend, -sb * notB - bend}};
            for (std::size_t p = 0; p < (last ? 1u : 2u); ++p)
                for (std::size_t q = 0; q < (last ? 1u : 2u); ++q) {
                    const double curvature = -share * (second[p][q] + (1 - share) * first[p] * first[q]);
                    for (std::size_t r = 0; r < size; ++r)
                        for (std::size_t c = 0; c < size; ++c)
                            information(r, c) += curvature * moves[p][r] * moves[q][c];
                }
        }
    }
    return information;
}

} // namespace whichway
