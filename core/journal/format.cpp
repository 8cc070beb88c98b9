// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/journal/format.h"

#include "core/files/sha256.h"
#include "core/journal/json.h"

#include <algorithm>
#include <cmath>
#include <iterator>
#include <limits>

namespace whichway {
namespace {

constexpr EnumWord<SessionKind> kSessionKinds[] = {{SessionKind::Participant, "participant"},
                                                   {SessionKind::Pilot, "pilot"},
                                                   {SessionKind::Simulated, "simulated"}};
constexpr EnumWord<TrialKind> kTrialKinds[] = {
    {TrialKind::Practice, "practice"}, {TrialKind::Main, "main"},   {TrialKind::HeldOut, "held-out"},
    {TrialKind::Repeat, "repeat"},     {TrialKind::Catch, "catch"}, {TrialKind::Identical, "identical"}};
constexpr EnumWord<Side> kSides[] = {{Side::None, "none"}, {Side::Left, "left"}, {Side::Right, "right"}};
constexpr EnumWord<SessionEnd> kSessionEnds[] = {{SessionEnd::Finished, "finished"},
                                                 {SessionEnd::Stopped, "stopped"},
                                                 {SessionEnd::ClosedAsPartial, "closed as partial"}};

/// A diagnostic may be undefined; JSON has no such number, so it is null there.
Json numbersToJson(const std::vector<double>& values) {
    Json json = Json::array();
    for (const double value : values)
        json.push_back(std::isnan(value) ? Json(nullptr) : Json(value));
    return json;
}

std::vector<double> numbersFromJson(const Json& json) {
    std::vector<double> values;
    for (const Json& value : json)
        values.push_back(value.is_null() ? std::numeric_limits<double>::quiet_NaN() : value.get<double>());
    return values;
}

} // namespace

static void to_json(Json& json, const TrialKind& value) {
    json = enumToJson(value, kTrialKinds);
}
static void from_json(const Json& json, TrialKind& value) {
    value = enumFromJson(json, kTrialKinds);
}
static void to_json(Json& json, const SessionKind& value) {
    json = enumToJson(value, kSessionKinds);
}
static void from_json(const Json& json, SessionKind& value) {
    value = enumFromJson(json, kSessionKinds);
}
static void to_json(Json& json, const Side& value) {
    json = enumToJson(value, kSides);
}
static void from_json(const Json& json, Side& value) {
    value = enumFromJson(json, kSides);
}
static void to_json(Json& json, const SessionEnd& value) {
    json = enumToJson(value, kSessionEnds);
}
static void from_json(const Json& json, SessionEnd& value) {
    value = enumFromJson(json, kSessionEnds);
}

// Each line names every field of its struct; a missing field or one of another type is an error on reading.
#define WHICHWAY_JSON(Type, ...)                                                                             \
    static void to_json(Json& nlohmann_json_j, const Type& nlohmann_json_t) {                                \
        NLOHMANN_JSON_EXPAND(NLOHMANN_JSON_PASTE(NLOHMANN_JSON_TO, __VA_ARGS__))                             \
    }                                                                                                        \
    static void from_json(const Json& nlohmann_json_j, Type& nlohmann_json_t) {                              \
        NLOHMANN_JSON_EXPAND(NLOHMANN_JSON_PASTE(NLOHMANN_JSON_FROM, __VA_ARGS__))                           \
    }

WHICHWAY_JSON(NamedPair, left, right)
WHICHWAY_JSON(ScheduledTrial, kind, left, right, repeatOf, expected, lowerLeft)
WHICHWAY_JSON(SessionBegan, session, kind, program, compiler, language, seed, protocol, schedule)
WHICHWAY_JSON(InstructionShown, page)
WHICHWAY_JSON(PlanAdopted, request, known, pending, seed, batch, plannerVersion, fallback, pairs, information,
              relaxed, seconds)
WHICHWAY_JSON(TrialShown, trial, kind, left, right, wait)
WHICHWAY_JSON(AnswerGiven, trial, answer, responseTime, replays, startSkew)
WHICHWAY_JSON(AnswerUndone, trial)
WHICHWAY_JSON(BreakShown, afterTrial)
WHICHWAY_JSON(Paused, reason)
WHICHWAY_JSON(NoteTaken, trial, text)
WHICHWAY_JSON(SessionResumed, program, droppedBytes)
WHICHWAY_JSON(SessionEnded, how, by, reason)

#undef WHICHWAY_JSON

static void to_json(Json& json, const WentOn&) {
    json = Json::object();
}
static void from_json(const Json&, WentOn&) {}
static void to_json(Json& json, const EstimateShown&) {
    json = Json::object();
}
static void from_json(const Json&, EstimateShown&) {}

static void to_json(Json& json, const EstimateMade& e) {
    json = {{"answers", e.answers},
            {"seed", e.seed},
            {"chains", e.chains},
            {"drawsPerChain", e.drawsPerChain},
            {"names", e.names},
            {"mean", numbersToJson(e.mean)},
            {"deviation", numbersToJson(e.deviation)},
            {"mcse", numbersToJson(e.mcse)},
            {"drawsDigest", e.drawsDigest},
            {"converged", e.converged}};
}
static void from_json(const Json& json, EstimateMade& e) {
    json.at("answers").get_to(e.answers);
    json.at("seed").get_to(e.seed);
    json.at("chains").get_to(e.chains);
    json.at("drawsPerChain").get_to(e.drawsPerChain);
    json.at("names").get_to(e.names);
    e.mean = numbersFromJson(json.at("mean"));
    e.deviation = numbersFromJson(json.at("deviation"));
    e.mcse = numbersFromJson(json.at("mcse"));
    json.at("drawsDigest").get_to(e.drawsDigest);
    json.at("converged").get_to(e.converged);
    if (e.mean.size() != e.names.size() || e.deviation.size() != e.names.size() ||
        e.mcse.size() != e.names.size())
        throw std::invalid_argument("the estimate's lists differ in length");
}

namespace {

/// What an event type is called in the journal: in the order of the variant.
constexpr const char* kTypes[] = {"session began", "instruction shown", "plan adopted",    "trial shown",
                                  "answer given",  "answer undone",     "break shown",     "paused",
                                  "went on",       "note taken",        "session resumed", "estimate shown",
                                  "session ended", "estimate made"};
static_assert(std::size(kTypes) == std::variant_size_v<Event>);

template <std::size_t I = 0>
Event eventOf(std::size_t type, const Json& payload) {
    if constexpr (I < std::variant_size_v<Event>) {
        if (type == I)
            return payload.get<std::variant_alternative_t<I, Event>>();
        return eventOf<I + 1>(type, payload);
    } else {
        throw std::invalid_argument("no such event type");
    }
}

/// The hash stands last in its line, so that what it covers is simply the text before it.
constexpr std::string_view kHashField = ",\"hash\":\"";
constexpr std::size_t kTailLength = kHashField.size() + 64 + 2;

bool endsWithHash(std::string_view line) {
    return line.size() >= kTailLength &&
           line.substr(line.size() - kTailLength, kHashField.size()) == kHashField && line.ends_with("\"}");
}

// Both only of a line that ends with its hash.
std::string hashField(std::string_view line) {
    return std::string(line.substr(line.size() - 66, 64));
}
std::string coveredBy(std::string_view line) {
    return std::string(line.substr(0, line.size() - kTailLength)) + "}";
}

bool isFinite(const Json& json) {
    if (json.is_number_float())
        return std::isfinite(json.get<double>());
    return !json.is_structured() || std::all_of(json.begin(), json.end(), isFinite);
}

/// Whether two values say the same, whichever way their numbers are written. The library reads 1.7, true or
/// 2^40 into an int without a word; comparing what was read with what stands there finds that, and fields
/// that nothing reads.
bool sameValue(const Json& a, const Json& b) {
    if (a.is_number_integer() && b.is_number_integer()) {
        const auto negative = [](const Json& n) {
            return !n.is_number_unsigned() && n.get<std::int64_t>() < 0;
        };
        return negative(a) == negative(b) && a.get<std::uint64_t>() == b.get<std::uint64_t>();
    }
    if (a.is_number() && b.is_number())
        return a.get<double>() == b.get<double>();
    if (a.type() != b.type() || a.size() != b.size())
        return false;
    if (a.is_array())
        return std::equal(a.begin(), a.end(), b.begin(), sameValue);
    if (!a.is_object())
        return a == b;
    for (const auto& [key, value] : a.items())
        if (const auto other = b.find(key); other == b.end() || !sameValue(value, *other))
            return false;
    return true;
}

Error corrupt(std::uint64_t number, const std::string& why) {
    return {.code = "journal.corrupt",
            .place = {.file = {}, .line = static_cast<int>(number)},
            .message = "Event " + std::to_string(number) + " of the journal is damaged: " + why + ".",
            .remedy = "Restore the journal from a backup; nothing was changed here.",
            .values = {std::to_string(number), why}};
}

Error newer(std::uint64_t number, const std::string& what) {
    return {.code = "journal.newer",
            .place = {.file = {}, .line = static_cast<int>(number)},
            .message = "Event " + std::to_string(number) + " of the journal " + what + ".",
            .remedy = "Open the session with the version of the program that wrote it, or a newer one.",
            .values = {std::to_string(number), what}};
}

/// All of the line but its two hashes.
Json toJson(const Record& record) {
    Json json;
    json["format"] = kJournalFormat;
    json["number"] = record.number;
    json["type"] = kTypes[record.event.index()];
    json["time"] = record.time;
    json["run"] = record.run;
    json["monotonic_ns"] = record.monotonic;
    json["payload"] = std::visit([](const auto& event) { return Json(event); }, record.event);
    return json;
}

} // namespace

EncodedRecord encodeRecord(const Record& record, std::string_view previousHash) {
    Json json = toJson(record);
    json["previous"] = std::string(previousHash);
    if (!isFinite(json))
        throw std::invalid_argument("encodeRecord: a number of the event is not finite");
    // Texts were checked where they came in; what is not UTF-8 all the same must not keep an answer from
    // being saved.
    std::string line = json.dump(-1, ' ', false, Json::error_handler_t::replace);
    EncodedRecord encoded;
    encoded.hash = sha256(line);
    line.pop_back(); // the brace
    line += kHashField;
    line += encoded.hash;
    line += "\"}\n";
    encoded.line = std::move(line);
    return encoded;
}

bool isWholeLine(std::string_view line) {
    return endsWithHash(line) && sha256(coveredBy(line)) == hashField(line);
}

Result<DecodedRecord> decodeRecord(std::string_view line, std::uint64_t expectedNumber,
                                   std::string_view previousHash) {
    if (!line.empty() && line.back() == '\n')
        line.remove_suffix(1);
    if (!endsWithHash(line))
        return corrupt(expectedNumber, "the line does not end with its hash");
    const std::string hash = hashField(line);
    const std::string covered = coveredBy(line);
    if (sha256(covered) != hash)
        return corrupt(expectedNumber, "its text does not fit its hash");
    Json json = Json::parse(covered, nullptr, false);
    if (json.is_discarded() || !json.is_object())
        return corrupt(expectedNumber, "it is no JSON object");
    // The library reports a missing field or a wrong type by throwing; this is the one place that turns it
    // into a value.
    try {
        if (json.at("previous").get<std::string>() != previousHash)
            return corrupt(expectedNumber, "it does not follow the event before it");
        json.erase("previous");
        DecodedRecord decoded{.record = {}, .hash = hash};
        if (const Json& format = json.at("format"); format != kJournalFormat)
            return newer(expectedNumber, "is written in format " + format.dump());
        json.at("number").get_to(decoded.record.number);
        if (decoded.record.number != expectedNumber)
            return corrupt(expectedNumber, "its number is " + std::to_string(decoded.record.number));
        json.at("time").get_to(decoded.record.time);
        json.at("run").get_to(decoded.record.run);
        json.at("monotonic_ns").get_to(decoded.record.monotonic);
        const std::string type = json.at("type").get<std::string>();
        for (std::size_t i = 0; i < std::size(kTypes); ++i) {
            if (type == kTypes[i]) {
                decoded.record.event = eventOf(i, json.at("payload"));
                if (!sameValue(toJson(decoded.record), json))
                    return corrupt(expectedNumber, "a field is of another type, out of range, or unknown");
                return decoded;
            }
        }
        return newer(expectedNumber, "is of a type that this program does not know: “" + type + "”");
    } catch (const std::exception& exception) {
        return corrupt(expectedNumber, exception.what());
    }
}

} // namespace whichway
