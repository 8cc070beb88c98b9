// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/session_posterior.h"

#include "core/files/sha256.h"
#include "core/preference/model_of_protocol.h"
#include "core/random.h"

#include <algorithm>
#include <span>
#include <string_view>

namespace whichway {
namespace {

std::span<const double> standardisedFeatures(const Protocol& protocol, const std::string& motion) {
    const auto& names = protocol.table.motions;
    const auto found = std::find(names.begin(), names.end(), motion);
    if (found == names.end())
        return {};
    return protocol.table.standardised.row(static_cast<std::size_t>(found - names.begin()));
}

std::string_view bitsOf(const std::vector<double>& values) {
    return {reinterpret_cast<const char*>(values.data()), values.size() * sizeof(double)};
}

} // namespace

std::vector<double> standardisedDifference(const Protocol& protocol, const std::string& left,
                                           const std::string& right) {
    const auto a = standardisedFeatures(protocol, left), b = standardisedFeatures(protocol, right);
    std::vector<double> difference;
    for (std::size_t j = 0; j < a.size() && j < b.size(); ++j)
        difference.push_back(a[j] - b[j]);
    return difference;
}

std::vector<Response> mainResponses(const SessionState& state) {
    std::vector<Response> responses;
    for (const AnsweredTrial& answer : state.answers)
        if (answer.kind == TrialKind::Main)
            responses.push_back(
                {.difference = standardisedDifference(state.began.protocol, answer.left, answer.right),
                 .answer = answer.answer});
    return responses;
}

SamplerSettings reportSettings(const SessionState& state) {
    SamplerSettings settings;
    settings.seed = deriveSeed(state.began.seed, 7);
    return settings;
}

Result<Posterior> sessionPosterior(const SessionState& state, std::stop_token stop) {
    const std::vector<Response> responses = mainResponses(state);
    if (responses.empty())
        return Error{.code = "session.no-answers",
                     .place = {},
                     .message = "The session holds no main answer, so there is nothing to learn from.",
                     .remedy = ""};
    return samplePosterior(responseModelOf(state.began.protocol), responses, reportSettings(state), stop);
}

EstimateMade estimateOf(const Posterior& posterior, int answers, const SamplerSettings& settings) {
    EstimateMade estimate{.answers = answers,
                          .seed = settings.seed,
                          .chains = settings.chains,
                          .drawsPerChain = settings.drawsPerChain,
                          .converged = posterior.converged};
    for (const ScalarSummary& summary : posterior.summaries) {
        estimate.names.push_back(summary.name);
        estimate.mean.push_back(summary.mean);
        estimate.deviation.push_back(summary.deviation);
        estimate.mcse.push_back(summary.mcse);
    }
    std::string bits(bitsOf(posterior.draws.weights.values));
    bits += bitsOf(posterior.draws.sideBias);
    bits += bitsOf(posterior.draws.cuts.values);
    estimate.drawsDigest = sha256(bits);
    return estimate;
}

} // namespace whichway
