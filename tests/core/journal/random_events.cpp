// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/core/journal/random_events.h"

#include "core/random.h"

#include <bit>
#include <cmath>
#include <stdexcept>

namespace whichway {
namespace {

class Maker {
public:
    explicit Maker(std::uint64_t seed) : random_(seed) {}

    std::string text() {
        static const std::string pieces[] = {
            "a", "Z", "\"", "\\", "\n", "\t", "\x01", "é", "“", "\xF0\x9F\x9A\x97", "/", " "};
        std::string made;
        for (std::size_t n = random_.below(12); n > 0; --n)
            made += pieces[random_.below(std::size(pieces))];
        return made;
    }
    double real() {
        for (;;)
            if (const auto value = std::bit_cast<double>(random_.bits()); std::isfinite(value))
                return random_.below(4) == 0 ? std::round(100 * random_.normal()) : value;
    }
    double realOrNaN() { return random_.below(5) == 0 ? std::nan("") : real(); }
    int integer() { return static_cast<int>(static_cast<std::uint32_t>(random_.bits())); }
    std::uint64_t big() { return random_.bits() >> random_.below(64); }
    bool yes() { return random_.below(2) == 0; }
    template <typename Enum>
    Enum word(std::size_t values) {
        return static_cast<Enum>(random_.below(values));
    }
    template <typename Make>
    auto list(Make make) {
        std::vector<decltype(make())> made;
        for (std::size_t n = random_.below(4); n > 0; --n)
            made.push_back(make());
        return made;
    }
    std::vector<std::string> texts() {
        return list([&] { return text(); });
    }
    NamedPair pair() { return {text(), text()}; }

    Protocol protocol() {
        Protocol p{.name = text(), .title = text(), .version = text(), .invented = yes(), .hash = text()};
        const std::size_t rows = random_.below(4), columns = random_.below(4);
        p.table.raw = Matrix(rows, columns);
        p.table.standardised = Matrix(rows, columns);
        for (Matrix* matrix : {&p.table.raw, &p.table.standardised})
            for (double& value : matrix->values)
                value = real();
        for (std::size_t i = 0; i < rows; ++i)
            p.table.motions.push_back(text());
        for (std::size_t j = 0; j < columns; ++j) {
            p.features.push_back({.name = text(),
                                  .label = text(),
                                  .unit = text(),
                                  .measure = text(),
                                  .settings = {{text(), real()}, {text(), real()}},
                                  .scale = word<FeatureScale>(3),
                                  .speakPer = real()});
            p.table.standardisation.push_back(
                {.mean = real(), .deviation = real(), .low = real(), .high = real()});
        }
        p.numeraire = text();
        p.levels = 1 + static_cast<int>(random_.below(7));
        p.cannotTell = yes();
        for (std::size_t n = 1 + random_.below(2); n > 0; --n) {
            p.texts.push_back({.language = text(),
                               .question = text(),
                               .instructions = texts(),
                               .left = text(),
                               .right = text(),
                               .sureness = text(),
                               .cannotTell = text(),
                               .practiceEnds = text(),
                               .breakText = text(),
                               .end = text()});
            for (int k = 0; k < p.levels; ++k)
                p.texts.back().confidence.push_back(text());
        }
        p.model = {.lapse = real(), .scale = word<WeightScale>(2), .sideBias = yes()};
        p.planning = {
            .schedule = word<PlanSchedule>(2), .batch = integer(), .choose = text(), .worth = text()};
        p.trials = {.practice = integer(),
                    .main = integer(),
                    .heldOut = integer(),
                    .repeat = integer(),
                    .catchTrials = integer(),
                    .identical = integer(),
                    .breakAfter = integer(),
                    .greyInterval = real()};
        p.practicePairs = list([&] { return PracticePair{text(), text()}; });
        p.catchPairs = list([&] { return CatchPair{text(), text()}; });
        p.scenes = list([&] { return scene(); });
        return p;
    }

    Event event(std::size_t index) {
        switch (index) {
        case 0:
            return SessionBegan{.session = text(),
                                .kind = word<SessionKind>(3),
                                .program = text(),
                                .compiler = text(),
                                .language = text(),
                                .seed = big(),
                                .protocol = protocol(),
                                .schedule = list([&] { return scheduled(); })};
        case 1:
            return InstructionShown{.page = integer()};
        case 2:
            return PlanAdopted{.request = big(),
                               .known = list([&] { return integer(); }),
                               .pending = list([&] { return pair(); }),
                               .seed = big(),
                               .batch = integer(),
                               .plannerVersion = integer(),
                               .fallback = yes(),
                               .pairs = list([&] { return pair(); }),
                               .information = list([&] { return real(); }),
                               .relaxed = texts(),
                               .seconds = real()};
        case 3:
            return TrialShown{.trial = integer(),
                              .kind = word<TrialKind>(6),
                              .left = text(),
                              .right = text(),
                              .wait = real()};
        case 4:
            return AnswerGiven{.trial = integer(),
                               .answer = integer(),
                               .responseTime = real(),
                               .replays = integer(),
                               .startSkew = real()};
        case 5:
            return AnswerUndone{.trial = integer()};
        case 6:
            return BreakShown{.afterTrial = integer()};
        case 7:
            return Paused{.reason = text()};
        case 8:
            return WentOn{};
        case 9:
            return NoteTaken{.trial = integer(), .text = text()};
        case 10:
            return SessionResumed{.program = text(), .droppedBytes = big()};
        case 11:
            return EstimateShown{};
        case 12:
            return SessionEnded{.how = word<SessionEnd>(3), .by = text(), .reason = text()};
        case 13:
            return estimate();
        default:
            throw std::invalid_argument("randomEvent: no such type");
        }
    }

    Record record(std::size_t index, std::uint64_t number) {
        Record made{.number = number,
                    .run = integer(),
                    .monotonic = static_cast<std::int64_t>(random_.bits()),
                    .time = text()};
        made.event = event(index);
        return made;
    }

private:
    ScheduledTrial scheduled() {
        return {.kind = word<TrialKind>(6),
                .left = text(),
                .right = text(),
                .repeatOf = integer(),
                .expected = word<Side>(3),
                .lowerLeft = yes()};
    }
    Scene scene() {
        return {.name = text(),
                .bounds = rectangle(),
                .floor = list([&] { return rectangle(); }),
                .walls = list([&] {
                    return Segment{real(), real(), real(), real()};
                }),
                .doors = list([&] {
                    return Door{real(), real(), real(), real(), real()};
                }),
                .furniture = list([&] { return rectangle(); }),
                .goal = list([&] { return real(); }),
                .robotLength = real(),
                .robotWidth = real(),
                .robotRadius = real(),
                .personRadius = real(),
                .keepRightAxis = real()};
    }
    Rectangle rectangle() { return {real(), real(), real(), real()}; }
    EstimateMade estimate() {
        EstimateMade made{.answers = integer(),
                          .seed = big(),
                          .chains = integer(),
                          .drawsPerChain = integer(),
                          .names = texts(),
                          .drawsDigest = text(),
                          .converged = yes()};
        for (std::size_t i = 0; i < made.names.size(); ++i) {
            made.mean.push_back(real());
            made.deviation.push_back(real());
            made.mcse.push_back(realOrNaN());
        }
        return made;
    }

    Random random_;
};

} // namespace

Event randomEvent(std::size_t index, std::uint64_t seed) {
    return Maker(seed).event(index);
}

Record randomRecord(std::size_t index, std::uint64_t number, std::uint64_t seed) {
    return Maker(seed).record(index, number);
}

} // namespace whichway
