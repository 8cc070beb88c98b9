// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/commands/check.h"

#include "app/commands/study_folder.h"
#include "app/terminal.h"
#include "core/preference/model_of_protocol.h"
#include "core/study/library_check.h"

#include <algorithm>
#include <fmt/core.h>

namespace whichway {
namespace {

constexpr std::uint64_t kAgreementSeed = 20260303;

void sayFindings(const std::vector<LibraryFinding>& findings) {
    if (findings.empty())
        say("The library has nothing that would weaken the study.");
    for (const LibraryFinding& finding : findings) {
        say(fmt::format("{}: {}", finding.weight == LibraryFinding::Weight::Warning ? "Warning" : "Note",
                        finding.message));
        say("    " + finding.effect);
        say("    " + finding.remedy);
    }
}

void sayFeatures(const Protocol& protocol, const FeatureSummary& summary) {
    say(fmt::format("\n{:<24}{:>10}{:>12}{:>12}{:>12}{:>8}{:>8}", "Feature", "unit", "least", "median",
                    "greatest", "skew", "VIF"));
    for (std::size_t j = 0; j < protocol.features.size(); ++j) {
        const FeatureSpread& spread = summary.features[j];
        say(fmt::format("{:<24}{:>10}{:>12.4g}{:>12.4g}{:>12.4g}{:>8.2f}{:>8.2f}", protocol.features[j].name,
                        protocol.features[j].unit, spread.least, spread.median, spread.greatest,
                        spread.skewness, spread.inflation));
    }
    say("\nCorrelation of the standardised features");
    for (std::size_t i = 0; i < protocol.features.size(); ++i) {
        std::string row = fmt::format("{:<24}", protocol.features[i].name);
        for (std::size_t j = 0; j <= i; ++j)
            row += fmt::format("{:>7.2f}", summary.correlation(i, j));
        say(row);
    }
}

/// Raw values with their units, then the standardised ones.
void sayTable(const Protocol& protocol) {
    std::string header = fmt::format("\n{:<12}", "Motion");
    for (const FeatureDefinition& feature : protocol.features)
        header +=
            fmt::format("{:>22}", feature.unit == "1" ? feature.name : feature.name + ", " + feature.unit);
    for (const FeatureDefinition& feature : protocol.features)
        header += fmt::format("{:>18}", "z " + feature.name);
    say(header);
    for (std::size_t i = 0; i < protocol.table.motions.size(); ++i) {
        std::string row = fmt::format("{:<12}", protocol.table.motions[i]);
        for (const double value : protocol.table.raw.row(i))
            row += fmt::format("{:>22.6g}", value);
        for (const double value : protocol.table.standardised.row(i))
            row += fmt::format("{:>18.4f}", value);
        if (!say(row))
            return; // nobody reads on
    }
}

} // namespace

int check(const std::string& folder, const std::string& featuresFile) {
    const RealFileSystem files;
    const auto study = openStudy(files, folder, featuresFile);
    if (!study)
        return kInputAtFault;
    const Protocol& protocol = study->protocol;
    const FeatureSummary summary = summarise(protocol.table);
    const ResponseModel model = responseModelOf(protocol);

    say(fmt::format("{} (version {}, protocol {}){}", protocol.title, protocol.version,
                    protocol.hash.substr(0, 8), protocol.invented ? ", invented data" : ""));
    say(fmt::format(
        "{} motions, {} features, {} trials: {} practice, {} main, {} held-out, {} repeat, {} catch, {} "
        "identical",
        protocol.table.motions.size(), protocol.features.size(),
        protocol.trials.practice + protocol.trials.main + protocol.trials.heldOut + protocol.trials.repeat +
            protocol.trials.catchTrials + protocol.trials.identical,
        protocol.trials.practice, protocol.trials.main, protocol.trials.heldOut, protocol.trials.repeat,
        protocol.trials.catchTrials, protocol.trials.identical));
    const SelfAgreement agreement = impliedSelfAgreement(protocol.table.standardised,
                                                         {.weightDeviation = model.weightScale(),
                                                          .logScaleDeviation = model.scaleDeviation,
                                                          .lapse = model.lapse},
                                                         kAgreementSeed);
    say(fmt::format(
        "By the prior, people would answer the same random pair the same way {:.0f} % of the time "
        "(nine in ten of them {:.0f} to {:.0f} %).\n",
        100 * agreement.mean, 100 * agreement.fifth, 100 * agreement.ninetyFifth));
    sayFindings(checkLibrary(*study, summary));
    sayFeatures(protocol, summary);
    sayTable(protocol);
    return kDone;
}

} // namespace whichway
