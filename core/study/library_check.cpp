// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/library_check.h"

#include <algorithm>
#include <cmath>
#include <fmt/format.h>
#include <set>
#include <span>
#include <stdexcept>

namespace whichway {

namespace {

using Weight = LibraryFinding::Weight;

std::string quoted(const std::string& text) {
    return "“" + text + "”";
}

std::string named(const std::vector<std::string>& motions, std::size_t count) {
    std::string text = fmt::format("{}", fmt::join(motions, ", "));
    if (count > motions.size())
        text += fmt::format(" and {} more", count - motions.size());
    return text;
}

void nameMotion(LibraryFinding& finding, const std::string& motion) {
    ++finding.count;
    if (finding.motions.size() < kMotionsNamed)
        finding.motions.push_back(motion);
}

/// What all the checks look at.
struct Subject {
    const Study& study;
    const FeatureSummary& summary;
    const LibraryLimits& limits;
    std::vector<LibraryFinding>& findings;

    const std::vector<FeatureDefinition>& features() const { return study.protocol.features; }
    const FeatureTable& table() const { return study.protocol.table; }
    std::span<const Trajectory> mainMotions() const { return {study.motions.data(), table().motions.size()}; }
};

void checkSameFeatures(const Subject& subject) {
    for (std::size_t j = 0; j < subject.features().size(); ++j)
        for (std::size_t k = j + 1; k < subject.features().size(); ++k) {
            const double r = subject.summary.correlation(j, k);
            if (!(std::fabs(r) > subject.limits.correlation))
                continue;
            LibraryFinding finding;
            finding.code = "library.same-features";
            finding.message =
                fmt::format("{} and {} cannot be told apart in this library: their correlation is {:.3f}.",
                            quoted(subject.features()[j].label), quoted(subject.features()[k].label), r);
            finding.effect =
                "Their two weights, and every trade-off with either, stay uncertain however many "
                "questions are asked; what motions a person likes is still learned.";
            finding.remedy =
                "Add motions in which one changes and the other does not, or leave one of the two out.";
            finding.features = {subject.features()[j].name, subject.features()[k].name};
            finding.count = 2;
            finding.value = r;
            subject.findings.push_back(std::move(finding));
        }
}

void checkInflation(const Subject& subject) {
    for (std::size_t j = 0; j < subject.features().size(); ++j) {
        const double inflation = subject.summary.features[j].inflation;
        if (!(inflation > subject.limits.inflation))
            continue;
        LibraryFinding finding;
        finding.code = "library.follows-from-others";
        finding.message =
            std::isinf(inflation)
                ? fmt::format("{} follows exactly from the other features.",
                              quoted(subject.features()[j].label))
                : fmt::format(
                      "{} nearly follows from the other features: its variance inflation factor is {:.1f}.",
                      quoted(subject.features()[j].label), inflation);
        finding.effect =
            std::isinf(inflation)
                ? "Its weight cannot be told from theirs at all."
                : fmt::format("Its weight is known {:.1f} times less precisely than if the features "
                              "varied freely.",
                              std::sqrt(inflation));
        finding.remedy = "Leave one of the features that move together out, or add motions that part them.";
        finding.features = {subject.features()[j].name};
        finding.count = 1;
        finding.value = inflation;
        subject.findings.push_back(std::move(finding));
    }
}

void checkAlmostConstant(const Subject& subject) {
    for (std::size_t j = 0; j < subject.features().size(); ++j) {
        const FeatureSpread& spread = subject.summary.features[j];
        const FeatureDefinition& feature = subject.features()[j];
        LibraryFinding finding;
        if (spread.mostSharedPart >= subject.limits.sharedPart) {
            finding.message = fmt::format("{} has one and the same value in {:.0f} % of the motions.",
                                          quoted(feature.label), 100 * spread.mostSharedPart);
            finding.value = spread.mostSharedPart;
        } else if (spread.deviation < subject.limits.relativeDeviation * std::fabs(spread.mean)) {
            finding.message =
                fmt::format("{} hardly varies: {:.4g} ± {:.2g}{}.", quoted(feature.label), spread.mean,
                            spread.deviation, feature.unit == "1" ? "" : " " + feature.unit);
            finding.value = spread.deviation / std::fabs(spread.mean);
        } else {
            continue;
        }
        finding.code = "library.almost-constant";
        finding.effect =
            "A few motions carry all that is learned of its weight, and a difference that nobody can see "
            "counts as much as a large one of another feature.";
        finding.remedy = "Add motions in which it varies as much as it would in use, or leave it out.";
        finding.features = {feature.name};
        finding.count = 1;
        subject.findings.push_back(std::move(finding));
    }
}

void checkSkew(const Subject& subject) {
    for (std::size_t j = 0; j < subject.features().size(); ++j) {
        const double skewness = subject.summary.features[j].skewness;
        if (!(std::fabs(skewness) > subject.limits.skewness))
            continue;
        const FeatureDefinition& feature = subject.features()[j];
        LibraryFinding finding;
        finding.code = "library.skewed";
        finding.message =
            fmt::format("{} is lopsided: its skewness is {:.2f}.", quoted(feature.label), skewness);
        finding.effect = "The most informative questions will be about the few motions in its long tail.";
        finding.remedy =
            skewness > 0 && subject.summary.features[j].least > 0 && feature.scale == FeatureScale::Plain
                ? "Set scale = \"log\" or scale = \"capped\" for it, or add motions to fill the tail."
                : "Set scale = \"capped\" for it, or add motions to fill the tail.";
        finding.features = {feature.name};
        finding.count = 1;
        finding.value = skewness;
        subject.findings.push_back(std::move(finding));
    }
}

void checkOutliers(const Subject& subject) {
    for (std::size_t j = 0; j < subject.features().size(); ++j) {
        LibraryFinding finding;
        for (std::size_t i = 0; i < subject.table().motions.size(); ++i) {
            const double z = subject.table().standardised(i, j);
            if (!(std::fabs(z) > subject.limits.outlier))
                continue;
            nameMotion(finding, subject.table().motions[i]);
            if (std::fabs(z) > std::fabs(finding.value))
                finding.value = z;
        }
        if (finding.count == 0)
            continue;
        finding.code = "library.outlier";
        finding.message = fmt::format("{} has values up to {:.1f} standard deviations from the mean, in {}.",
                                      quoted(subject.features()[j].label), finding.value,
                                      named(finding.motions, finding.count));
        finding.effect =
            "Questions about these motions look the most informative and will be asked again and again.";
        finding.remedy = "See whether they are motions that could happen; if not, take them out, if so, set "
                         "scale = \"capped\".";
        finding.features = {subject.features()[j].name};
        subject.findings.push_back(std::move(finding));
    }
}

void checkNearDuplicates(const Subject& subject) {
    const Matrix& z = subject.table().standardised;
    const double limit = subject.limits.duplicateDistance * subject.limits.duplicateDistance;
    LibraryFinding finding;
    double closest = limit;
    for (std::size_t a = 0; a < z.rows; ++a)
        for (std::size_t b = a + 1; b < z.rows; ++b) {
            double squared = 0;
            for (std::size_t j = 0; j < z.columns && squared < limit; ++j)
                squared += (z(a, j) - z(b, j)) * (z(a, j) - z(b, j));
            if (squared >= limit)
                continue;
            nameMotion(finding, subject.table().motions[a] + " ≈ " + subject.table().motions[b]);
            closest = std::min(closest, squared);
        }
    if (finding.count == 0)
        return;
    finding.code = "library.near-duplicates";
    finding.weight = Weight::Note;
    finding.message = fmt::format("{} {} of motions {} nearly the same in every feature: {}.", finding.count,
                                  finding.count == 1 ? "pair" : "pairs", finding.count == 1 ? "is" : "are",
                                  named(finding.motions, finding.count));
    finding.effect =
        "A question about such a pair teaches nothing, so none is planned; the library is smaller than it "
        "looks.";
    finding.remedy = "Keep one of each pair, or add the feature in which they differ.";
    finding.value = std::sqrt(closest);
    subject.findings.push_back(std::move(finding));
}

/// The feature that tells how long a motion lasts, or nullptr.
const FeatureDefinition* featureOfLength(const Subject& subject) {
    const std::span<const Trajectory> motions = subject.mainMotions();
    const double count = static_cast<double>(motions.size());
    double mean = 0;
    for (const Trajectory& motion : motions)
        mean += motion.duration() / count;
    double squares = 0;
    std::vector<double> products(subject.features().size());
    for (std::size_t i = 0; i < motions.size(); ++i) {
        const double difference = motions[i].duration() - mean;
        squares += difference * difference;
        for (std::size_t j = 0; j < products.size(); ++j)
            products[j] += difference * subject.table().standardised(i, j);
    }
    for (std::size_t j = 0; j < products.size(); ++j)
        if (std::fabs(products[j]) > subject.limits.correlation * std::sqrt(squares * count))
            return &subject.features()[j];
    return nullptr;
}

void checkLengths(const Subject& subject) {
    const std::span<const Trajectory> motions = subject.mainMotions();
    const auto byLength = [](const Trajectory& a, const Trajectory& b) {
        return a.duration() < b.duration();
    };
    const auto [shortest, longest] = std::minmax_element(motions.begin(), motions.end(), byLength);
    const double difference = longest->duration() - shortest->duration();
    if (difference > subject.limits.lengthDifference + 1e-9) {
        const FeatureDefinition* feature = featureOfLength(subject);
        LibraryFinding finding;
        finding.weight = feature != nullptr ? Weight::Note : Weight::Warning;
        finding.code = "library.unequal-lengths";
        finding.message =
            fmt::format("The motions last from {:.1f} s ({}) to {:.1f} s ({}).", shortest->duration(),
                        shortest->name, longest->duration(), longest->name);
        finding.effect =
            "Of a pair that starts together, the shorter motion stands still at its end, so people see "
            "which is longer";
        if (feature != nullptr) {
            finding.effect += fmt::format("; {} follows the length, so the weights account for it.",
                                          quoted(feature->label));
            finding.remedy = "Nothing, if people are meant to judge the time that a motion takes.";
            finding.features = {feature->name};
        } else {
            finding.effect +=
                " and may choose by it, and no feature tells the length: the other weights take the blame.";
            finding.remedy = "Add the travel time as a feature, or cut all motions to one length.";
        }
        finding.motions = {shortest->name, longest->name};
        finding.count = 2;
        finding.value = difference;
        subject.findings.push_back(std::move(finding));
    }

    LibraryFinding finding;
    for (const Trajectory& motion : motions)
        if (motion.duration() > subject.limits.length + 1e-9)
            nameMotion(finding, motion.name);
    if (finding.count == 0)
        return;
    finding.code = "library.long-motions";
    finding.message = fmt::format("{} of {} motions last longer than {:g} s, up to {:.1f} s: {}.",
                                  finding.count, motions.size(), subject.limits.length, longest->duration(),
                                  named(finding.motions, finding.count));
    finding.effect =
        "A session takes longer, and people judge the end of a long motion more than its beginning.";
    finding.remedy = "Cut the motions to the part in which they differ.";
    finding.value = longest->duration();
    subject.findings.push_back(std::move(finding));
}

void checkUnused(const Subject& subject) {
    std::set<std::string> used;
    for (const PracticePair& pair : subject.study.protocol.practicePairs)
        used.insert({pair.left, pair.right});
    for (const CatchPair& pair : subject.study.protocol.catchPairs)
        used.insert({pair.better, pair.worse});
    LibraryFinding finding;
    for (std::size_t i = subject.table().motions.size(); i < subject.study.motions.size(); ++i)
        if (!used.contains(subject.study.motions[i].name))
            nameMotion(finding, subject.study.motions[i].name);
    if (finding.count == 0)
        return;
    finding.weight = Weight::Note;
    finding.code = "library.unused-motions";
    finding.message =
        fmt::format("No practice or catch pair shows {}.", named(finding.motions, finding.count));
    finding.effect = "Nobody will see these motions.";
    finding.remedy = "Name them in a pair, or give them the role main in library.csv, or take them out.";
    subject.findings.push_back(std::move(finding));
}

} // namespace

std::vector<LibraryFinding> checkLibrary(const Study& study, const FeatureSummary& summary,
                                         const LibraryLimits& limits) {
    const FeatureTable& table = study.protocol.table;
    if (table.motions.size() < 2 || table.standardised.rows != table.motions.size() ||
        table.standardised.columns != study.protocol.features.size() ||
        study.motions.size() < table.motions.size() ||
        summary.features.size() != study.protocol.features.size())
        throw std::invalid_argument("a library is checked with its whole feature table and motions");
    std::vector<LibraryFinding> findings;
    const Subject subject{study, summary, limits, findings};
    checkSameFeatures(subject);
    checkInflation(subject);
    checkAlmostConstant(subject);
    checkSkew(subject);
    checkOutliers(subject);
    checkNearDuplicates(subject);
    checkLengths(subject);
    checkUnused(subject);
    return findings;
}

} // namespace whichway
