// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/journal/format.h"

#include "core/files/sha256.h"
#include "tests/core/journal/random_events.h"

#include <cmath>
#include <gtest/gtest.h>
#include <limits>
#include <nlohmann/json.hpp>

using namespace whichway;

namespace {

using Json = nlohmann::ordered_json;

const std::string kPrevious(64, 'a');
constexpr std::size_t kTypes = std::variant_size_v<Event>;

/// A line of any content with a sound hash, as only somebody who means to would write it.
std::string sealed(Json json) {
    json.erase("hash");
    std::string line = json.dump();
    const std::string hash = sha256(line);
    line.pop_back();
    return line + ",\"hash\":\"" + hash + "\"}\n";
}

Json parsed(const std::string& line) {
    return Json::parse(line);
}

std::string codeOf(const std::string& line, std::uint64_t number = 5) {
    const auto decoded = decodeRecord(line, number, kPrevious);
    if (decoded)
        return "";
    EXPECT_EQ(decoded.error().place.line, static_cast<int>(number));
    return decoded.error().code;
}

/// Every value within `json`, by pointer, objects and lists as well.
void collect(const Json& json, const Json::json_pointer& at, std::vector<Json::json_pointer>& into) {
    into.push_back(at);
    if (json.is_object())
        for (const auto& [key, value] : json.items())
            collect(value, at / key, into);
    if (json.is_array())
        for (std::size_t i = 0; i < json.size(); ++i)
            collect(json[i], at / i, into);
}

class EveryType : public ::testing::TestWithParam<std::size_t> {
protected:
    /// One with as much in it as can be had, so that no field is missed.
    std::string fullLine() const {
        std::string longest;
        for (std::uint64_t seed = 1; seed <= 40; ++seed) {
            std::string line = encodeRecord(randomRecord(GetParam(), 5, seed), kPrevious).line;
            if (line.size() > longest.size())
                longest = std::move(line);
        }
        return longest;
    }
};

/// NaN is not equal to itself, but it must come back as NaN.
void makeComparable(Record& record) {
    if (auto* estimate = std::get_if<EstimateMade>(&record.event))
        for (double& value : estimate->mcse)
            if (std::isnan(value))
                value = -12345;
}

} // namespace

TEST_P(EveryType, ReadsBackToTheSameBits) {
    for (std::uint64_t seed = 1; seed <= 50; ++seed) {
        Record record = randomRecord(GetParam(), seed, seed);
        const EncodedRecord encoded = encodeRecord(record, kPrevious);
        ASSERT_EQ(encoded.line.find('\n'), encoded.line.size() - 1);
        EXPECT_TRUE(isWholeLine(std::string_view(encoded.line).substr(0, encoded.line.size() - 1)));
        auto decoded = decodeRecord(encoded.line, seed, kPrevious);
        ASSERT_TRUE(decoded.ok()) << "seed " << seed << ": " << describe(decoded.error());
        EXPECT_EQ(decoded->hash, encoded.hash);
        makeComparable(record);
        makeComparable(decoded->record);
        EXPECT_TRUE(decoded->record == record) << "seed " << seed;
    }
}

TEST_P(EveryType, WritesItsFieldsInTheDocumentedOrder) {
    const Json line = parsed(fullLine());
    std::vector<std::string> keys;
    for (const auto& [key, value] : line.items())
        keys.push_back(key);
    EXPECT_EQ(keys, (std::vector<std::string>{"format", "number", "type", "time", "run", "monotonic_ns",
                                              "payload", "previous", "hash"}));
}

// Each value is taken out, replaced by one of every other type, and joined by a field that nobody knows:
// always a clear error, never an exception or a value that is not what stands there.
TEST_P(EveryType, RefusesEveryMissingUnknownOrMistypedField) {
    const Json good = parsed(fullLine());
    ASSERT_EQ(codeOf(sealed(good)), "");
    std::vector<Json::json_pointer> places;
    collect(good, Json::json_pointer(), places);
    const std::vector<Json> others = {nullptr, true, -1, 1.5, 1e300, "text", Json::array(), Json::object()};
    for (const auto& place : places) {
        if (place.empty() || place.to_string() == "/hash")
            continue;
        const bool inMap = place.to_string().find("/settings/") != std::string::npos; // any name, any number
        const Json& value = good[place];
        if (good[place.parent_pointer()].is_object() && !inMap) {
            Json without = good;
            without[place.parent_pointer()].erase(place.back());
            EXPECT_EQ(codeOf(sealed(without)), "journal.corrupt") << "without " << place;
        }
        if (value.is_object() && place.back() != "settings") {
            Json more = good;
            more[place]["unheard"] = 1;
            EXPECT_EQ(codeOf(sealed(more)), "journal.corrupt") << "more in " << place;
        }
        for (const Json& other : others) {
            const bool sameSort = other.type() == value.type() || (other.is_number() && value.is_number());
            const bool undefined = GetParam() == 13 && (other.is_null() || other.is_number()) &&
                                   (value.is_null() || value.is_number()); // an estimate's NaN
            const bool emptyList = value.is_object() && other.is_object();
            if (sameSort || undefined || emptyList)
                continue;
            Json changed = good;
            changed[place] = other;
            const std::string code = codeOf(sealed(changed));
            EXPECT_EQ(code, place.to_string() == "/format" ? "journal.newer" : "journal.corrupt")
                << place << " as " << other;
        }
        if (value.is_number_integer() && place.to_string() != "/format") {
            const double half = std::round(std::fmod(value.get<double>(), 1e9)) + 0.5;
            for (const Json& other : {Json(half), Json("1"), Json(1e300)}) {
                Json changed = good;
                changed[place] = other;
                EXPECT_EQ(codeOf(sealed(changed)), "journal.corrupt") << place << " as " << other;
            }
        }
    }
}

INSTANTIATE_TEST_SUITE_P(Types, EveryType, ::testing::Range<std::size_t>(0, kTypes));

// The format is settled: this line was written down once, and its hash by coreutils' sha256sum.
TEST(JournalFormat, StaysAsItIs) {
    const std::string covered =
        R"({"format":1,"number":7,"type":"answer given","time":"2026-03-03T14:02:11.250+01:00","run":2,)"
        R"("monotonic_ns":81234567890,"payload":{"trial":3,"answer":-2,"responseTime":1.25,"replays":1,)"
        R"("startSkew":0.0},"previous":"aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa"})";
    const std::string hash = "785ff1ed56e6b6fadaccc0ba9a9cb63db86745c0b90cc008dfdcb5c71550cdcb";
    const Record record{
        .number = 7,
        .run = 2,
        .monotonic = 81234567890,
        .time = "2026-03-03T14:02:11.250+01:00",
        .event = AnswerGiven{.trial = 3, .answer = -2, .responseTime = 1.25, .replays = 1, .startSkew = 0}};
    const EncodedRecord encoded = encodeRecord(record, kPrevious);
    EXPECT_EQ(encoded.line, covered.substr(0, covered.size() - 1) + ",\"hash\":\"" + hash + "\"}\n");
    EXPECT_EQ(encoded.hash, hash);
}

TEST(JournalFormat, ReadsOtherWaysToWriteTheSameNumber) {
    Json json =
        parsed(encodeRecord({.number = 5, .event = TrialShown{.trial = 1, .wait = 2}}, kPrevious).line);
    json["payload"]["wait"] = 2; // 2 for 2.0
    const auto decoded = decodeRecord(sealed(json), 5, kPrevious);
    ASSERT_TRUE(decoded.ok());
    EXPECT_EQ(std::get<TrialShown>(decoded->record.event).wait, 2);
}

TEST(JournalFormat, LeavesTypesAndFormatsItDoesNotKnowToNewerPrograms) {
    Json json = parsed(encodeRecord({.number = 5, .event = WentOn{}}, kPrevious).line);
    json["type"] = "danced";
    EXPECT_EQ(codeOf(sealed(json)), "journal.newer");
    json["type"] = "went on";
    json["format"] = kJournalFormat + 1;
    json["colour"] = "blue";
    EXPECT_EQ(codeOf(sealed(json)), "journal.newer");
}

TEST(JournalFormat, RefusesABrokenChainAnOtherNumberAndWhatIsNoRecord) {
    const std::string line = encodeRecord({.number = 5, .event = WentOn{}}, kPrevious).line;
    EXPECT_EQ(codeOf(line), "");
    EXPECT_EQ(codeOf(line, 6), "journal.corrupt");
    EXPECT_FALSE(decodeRecord(line, 5, std::string(64, 'b')).ok());
    EXPECT_EQ(codeOf(""), "journal.corrupt");
    EXPECT_EQ(codeOf("\n"), "journal.corrupt");
    EXPECT_EQ(codeOf("{}\n"), "journal.corrupt");
    for (const char* text : {"[]", "1", "\"x\"", "{", "nonsense", ""}) {
        // Sealed by hand, since none of these is an object.
        const std::string covered = std::string(text) + "}";
        EXPECT_EQ(codeOf(text + (",\"hash\":\"" + sha256(covered)) + "\"}\n"), "journal.corrupt") << text;
    }
}

TEST(JournalFormat, RefusesSettingsOutOfRange) {
    const std::string line = encodeRecord(randomRecord(0, 5, 3), kPrevious).line;
    for (const int levels : {0, 8, -1}) {
        Json json = parsed(line);
        json["payload"]["protocol"]["levels"] = levels;
        EXPECT_EQ(codeOf(sealed(json)), "journal.corrupt");
    }
    Json json = parsed(line);
    json["payload"]["protocol"]["texts"] = Json::array();
    EXPECT_EQ(codeOf(sealed(json)), "journal.corrupt");
    json = parsed(line);
    json["payload"]["protocol"]["table"]["motions"].push_back("one too many");
    EXPECT_EQ(codeOf(sealed(json)), "journal.corrupt");
    json = parsed(line);
    json["payload"]["protocol"]["table"]["raw"]["rows"] = 4000000000;
    EXPECT_EQ(codeOf(sealed(json)), "journal.corrupt");
}

TEST(JournalFormat, NeverWritesWhatCouldNotBeReadBack) {
    const double infinity = std::numeric_limits<double>::infinity(), nan = std::nan("");
    for (const double value : {infinity, -infinity})
        EXPECT_THROW(
            encodeRecord({.number = 1, .event = EstimateMade{.names = {"a"}, .mean = {value}}}, kPrevious),
            std::invalid_argument);
    for (const double value : {infinity, nan}) {
        EXPECT_THROW(encodeRecord({.number = 1, .event = AnswerGiven{.responseTime = value}}, kPrevious),
                     std::invalid_argument);
        EXPECT_THROW(encodeRecord({.number = 1, .event = PlanAdopted{.information = {value}}}, kPrevious),
                     std::invalid_argument);
        SessionBegan began;
        began.protocol.model.lapse = value;
        EXPECT_THROW(encodeRecord({.number = 1, .event = began}, kPrevious), std::invalid_argument);
    }
}

// An answer must not be lost because somebody's keyboard sent bytes that are no text.
TEST(JournalFormat, WritesBytesThatAreNoTextAsReplacementCharacters) {
    const auto encoded = encodeRecord({.number = 1,
                                       .event = NoteTaken{.text = "a\xFF"
                                                                  "b"}},
                                      kPrevious);
    const auto decoded = decodeRecord(encoded.line, 1, kPrevious);
    ASSERT_TRUE(decoded.ok());
    EXPECT_EQ(std::get<NoteTaken>(decoded->record.event).text, "a\xEF\xBF\xBD"
                                                               "b");
}
