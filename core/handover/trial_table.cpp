// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/handover/trial_table.h"

#include "core/files/csv.h"

#include <algorithm>
#include <cmath>
#include <cstdlib>
#include <limits>
#include <vector>

namespace whichway {
namespace {

struct Column {
    std::string name = {}, meaning = {}, unit = {}, values = {};
};

std::vector<Column> columnsOf(const Protocol& protocol) {
    std::vector<Column> columns = {
        {"row", "Number of the row, in the order of the answers", "1", "from 1"},
        {"session_kind", "Who answered", "", "participant, pilot, simulated"},
        {"trial", "Number of the trial in the schedule", "1", "from 1"},
        {"kind", "What the trial is for; only main trials teach the weights", "",
         "practice, main, held-out, repeat, catch, identical"},
        {"left", "Motion shown on the left", "", "name of a motion"},
        {"right", "Motion shown on the right", "", "name of a motion"},
        {"choice", "Side that was chosen", "", "left, right, cannot tell"},
        {"confidence", "Confidence level of the choice, from least sure", "1",
         "1 to " + std::to_string(protocol.levels) + "; n/a with cannot tell"},
        {"response_time_s", "From when answering became possible to the answer", "s", "n/a: not known"},
        {"replays", "How often the pair was played again", "1", "from 0"},
        {"start_skew_s", "Between the first frames of the two sides", "s", ""},
        {"wait_s", "How long the participant waited for the pair beyond the grey interval", "s", ""},
        {"repeat_of", "Trial that this one repeats with its sides swapped", "1", "n/a: no repeat"},
        {"expected", "Side of the better motion of a catch pair", "", "left, right, n/a"},
        {"information_bit", "Information that the planner expected of the answer", "bit", "n/a: not planned"},
        {"protocol_hash", "SHA-256 of the protocol", "", "64 hexadecimal digits"},
        {"language", "Language of the texts shown", "", "BCP 47"},
    };
    for (const char* side : {"left", "right"})
        for (const FeatureDefinition& feature : protocol.features)
            columns.push_back({std::string(side) + "_" + feature.name,
                               feature.label + " of the motion on the " + side, feature.unit,
                               "n/a: not of the main library"});
    return columns;
}

const char* wordFor(TrialKind kind) {
    static constexpr const char* kWords[] = {"practice", "main", "held-out", "repeat", "catch", "identical"};
    return kWords[static_cast<int>(kind)];
}

const char* wordFor(SessionKind kind) {
    static constexpr const char* kWords[] = {"participant", "pilot", "simulated"};
    return kWords[static_cast<int>(kind)];
}

void addFeatures(CsvBuilder& csv, const Protocol& protocol, const std::string& motion) {
    const auto& names = protocol.table.motions;
    const auto found = std::find(names.begin(), names.end(), motion);
    for (std::size_t j = 0; j < protocol.features.size(); ++j)
        csv.number(found == names.end()
                       ? std::numeric_limits<double>::quiet_NaN()
                       : protocol.table.raw(static_cast<std::size_t>(found - names.begin()), j));
}

} // namespace

std::string trialTable(const SessionState& state) {
    const Protocol& protocol = state.began.protocol;
    std::vector<std::string> header;
    for (const Column& column : columnsOf(protocol))
        header.push_back(column.name);
    CsvBuilder csv(header);
    constexpr double kUnknown = std::numeric_limits<double>::quiet_NaN();
    long long row = 0;
    for (const AnsweredTrial& answer : state.answers) {
        const ScheduledTrial& scheduled = state.began.schedule[static_cast<std::size_t>(answer.trial - 1)];
        csv.integer(++row).text(wordFor(state.began.kind)).integer(answer.trial).text(wordFor(answer.kind));
        csv.text(answer.left).text(answer.right);
        csv.text(answer.answer == 0 ? "cannot tell" : (answer.answer > 0 ? "left" : "right"));
        csv.number(answer.answer == 0 ? kUnknown : std::abs(answer.answer));
        csv.number(answer.responseTime < 0 ? kUnknown : answer.responseTime).integer(answer.replays);
        csv.number(answer.startSkew).number(answer.wait);
        csv.number(scheduled.repeatOf > 0 ? scheduled.repeatOf : kUnknown);
        csv.text(scheduled.expected == Side::None ? "n/a"
                                                  : (scheduled.expected == Side::Left ? "left" : "right"));
        csv.number(answer.kind == TrialKind::Main ? answer.information : kUnknown);
        csv.text(protocol.hash).text(state.began.language);
        addFeatures(csv, protocol, answer.left);
        addFeatures(csv, protocol, answer.right);
        csv.endRow();
    }
    return csv.content();
}

std::string codebook(const Protocol& protocol) {
    CsvBuilder csv({"column", "meaning", "unit", "values"});
    for (const Column& column : columnsOf(protocol))
        csv.text(column.name).text(column.meaning).text(column.unit).text(column.values).endRow();
    return csv.content();
}

} // namespace whichway
