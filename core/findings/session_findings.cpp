// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/session_findings.h"

#include "core/findings/session_posterior.h"
#include "core/preference/model_of_protocol.h"

#include <algorithm>
#include <span>
#include <stdexcept>

namespace whichway {

Result<SessionFindings> findSession(const SessionState& state, int courseStep, std::stop_token stop) {
    if (courseStep < 1)
        throw std::invalid_argument("findSession: the step of the course is at least 1");
    const Protocol& protocol = state.began.protocol;
    auto posterior = sessionPosterior(state, stop);
    if (!posterior)
        return posterior.error();
    SessionFindings found{.model = responseModelOf(protocol), .sampler = reportSettings(state)};
    found.posterior = std::move(*posterior);
    const Draws& draws = found.posterior.draws;
    const std::vector<Response> responses = mainResponses(state);
    found.mainAnswers = static_cast<int>(responses.size());
    found.weights = findWeights(protocol, draws);
    found.tradeOffs = findTradeOffs(protocol, draws);
    found.motions = findBestMotions(protocol, draws);
    found.consistency = findConsistency(state, draws);
    found.prediction = findPrediction(state, found.model, draws, found.consistency.repeats);
    found.sideBias = intervalOf(draws.sideBias);

    for (int answers = courseStep; answers < found.mainAnswers + courseStep; answers += courseStep) {
        const int known = std::min(answers, found.mainAnswers);
        SamplerSettings settings = found.sampler;
        settings.drawsPerChain = 300;
        settings.diagnose = false;
        const auto earlier =
            known == found.mainAnswers
                ? Result<Posterior>(found.posterior)
                : samplePosterior(found.model, std::span(responses).first(static_cast<std::size_t>(known)),
                                  settings, stop);
        if (!earlier)
            return earlier.error();
        const WeightFindings weights = findWeights(protocol, earlier->draws);
        CoursePoint point{.answers = known,
                          .sensitivity = weights.sensitivity,
                          .directionPrecision = weights.directionPrecision};
        for (const WeightFinding& weight : weights.features)
            point.direction.push_back(weight.direction);
        found.course.push_back(std::move(point));
    }
    return found;
}

} // namespace whichway
