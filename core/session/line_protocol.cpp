// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/session/line_protocol.h"

#include "core/files/sha256.h"

#include <cmath>
#include <nlohmann/json.hpp>
#include <optional>

namespace whichway {
namespace {

using Json = nlohmann::ordered_json;

/// A line longer than this is not one of ours.
constexpr std::size_t kLongestLine = 64 * 1024;

std::string lineOf(const Json& json) {
    return json.dump(-1, ' ', false, Json::error_handler_t::replace);
}

Error badLine(const std::string& message, const std::string& remedy = "") {
    return {.code = "line.bad", .place = {}, .message = message, .remedy = remedy};
}

std::string refused(const Error& error) {
    return lineOf({{"type", "refused"}, {"code", error.code}, {"reason", describe(error)}});
}

/// The object of a line, with a text "type" and none of the fields that its type does not know.
Result<Json> objectOf(std::string_view line) {
    if (line.size() > kLongestLine)
        return badLine("The line is longer than 64 KiB.");
    Json json = Json::parse(line, nullptr, false);
    if (json.is_discarded())
        return badLine("The line is no JSON.", "Send one JSON object a line.");
    if (!json.is_object() || !json.contains("type") || !json["type"].is_string())
        return badLine("The line is no object with a text \"type\".");
    return json;
}

Result<void> onlyFields(const Json& json, std::initializer_list<const char*> known) {
    for (const auto& [key, value] : json.items()) {
        bool found = key == "type";
        for (const char* name : known)
            found = found || key == name;
        if (!found)
            return badLine("“" + key + "” is not a field of “" + json["type"].get<std::string>() + "”.");
    }
    return {};
}

Result<GivenAnswer> answerOf(const Json& json, int onStage, int levels) {
    if (auto fields = onlyFields(json, {"choice", "confidence", "trial", "response_time", "replays"});
        !fields)
        return fields.error();
    GivenAnswer given;
    if (json.contains("trial")) {
        if (!json["trial"].is_number_integer())
            return badLine("\"trial\" is no whole number.");
        if (json["trial"].get<long long>() != onStage)
            return badLine("Trial " + json["trial"].dump() + " is not on the stage.");
    }
    if (!json.contains("choice") || !json["choice"].is_string())
        return badLine("The answer has no \"choice\".", "It is \"left\", \"right\" or \"cannot tell\".");
    const std::string choice = json["choice"].get<std::string>();
    if (choice == "cannot tell") {
        if (json.contains("confidence"))
            return badLine("\"cannot tell\" goes without a confidence.");
    } else if (choice == "left" || choice == "right") {
        if (!json.contains("confidence") || !json["confidence"].is_number_integer())
            return badLine("The answer has no whole number \"confidence\".",
                           "It is 1 to " + std::to_string(levels) + ".");
        const auto confidence = json["confidence"].get<long long>();
        if (confidence < 1 || confidence > levels)
            return badLine("Confidence " + std::to_string(confidence) + " is not one of 1 to " +
                           std::to_string(levels) + ".");
        given.answer = static_cast<int>(choice == "left" ? confidence : -confidence);
    } else {
        return badLine("“" + choice + "” is no choice.", "It is \"left\", \"right\" or \"cannot tell\".");
    }
    if (json.contains("response_time")) {
        if (!json["response_time"].is_number())
            return badLine("\"response_time\" is no number.");
        given.responseTime = json["response_time"].get<double>();
        if (!(given.responseTime >= 0 && given.responseTime < 86400))
            return badLine("\"response_time\" is not between 0 and 86400 s.");
    }
    if (json.contains("replays")) {
        if (!json["replays"].is_number_unsigned() || json["replays"].get<std::uint64_t>() > 10000)
            return badLine("\"replays\" is no count.");
        given.replays = json["replays"].get<int>();
    }
    return given;
}

} // namespace

LineSession::LineSession(Conductor& conductor, bool resumed) : conductor_(conductor), resumed_(resumed) {}

bool LineSession::ended() const {
    return conductor_.prompt().kind == PromptKind::Ended;
}

bool LineSession::mayProceed() const {
    switch (conductor_.prompt().kind) {
    case PromptKind::Trial:
    case PromptKind::Paused:
    case PromptKind::Ended:
        return false;
    default:
        return true;
    }
}

std::string LineSession::savedLine() const {
    const AnsweredTrial& last = conductor_.state().answers.back();
    const std::string text =
        std::to_string(last.trial) + " " + last.left + " " + last.right + " " + std::to_string(last.answer);
    return lineOf({{"type", "saved"}, {"trial", last.trial}, {"digest", sha256(text)}});
}

std::vector<std::string> LineSession::promptLines() {
    const Prompt prompt = conductor_.prompt();
    switch (prompt.kind) {
    case PromptKind::Instruction:
        if (prompt.page == 0)
            return {};
        return {lineOf({{"type", "instruction"},
                        {"page", prompt.page},
                        {"pages", prompt.pages},
                        {"text", prompt.text}})};
    case PromptKind::PracticeEnds:
        return {lineOf({{"type", "instruction"},
                        {"page", prompt.pages + 1},
                        {"pages", prompt.pages + 1},
                        {"text", prompt.text}})};
    case PromptKind::Trial: {
        static constexpr const char* kKinds[] = {"practice", "main",  "held-out",
                                                 "repeat",   "catch", "identical"};
        const Protocol& protocol = conductor_.state().began.protocol;
        return {lineOf({{"type", prompt.trialKind == TrialKind::Practice ? "practice" : "pair"},
                        {"trial", prompt.trial},
                        {"kind", kKinds[static_cast<int>(prompt.trialKind)]},
                        {"left", prompt.left},
                        {"right", prompt.right},
                        {"question", conductor_.texts().question},
                        {"confidence", conductor_.texts().confidence},
                        {"cannot_tell", protocol.cannotTell},
                        {"done", prompt.done},
                        {"total", prompt.total}})};
    }
    case PromptKind::Break:
        return {lineOf({{"type", "break"}, {"text", prompt.text}})};
    case PromptKind::Paused:
        return {lineOf({{"type", "paused"}})};
    case PromptKind::WaitingForPlan:
        return {lineOf({{"type", "waiting"}})};
    case PromptKind::Ended:
        return {
            lineOf({{"type", "finished"},
                    {"how", conductor_.state().ended->how == SessionEnd::Finished ? "finished" : "stopped"},
                    {"text", prompt.text},
                    {"answers", prompt.done}})};
    case PromptKind::Saved:
        return {};
    }
    return {};
}

std::vector<std::string> LineSession::start() {
    std::vector<std::string> lines;
    if (resumed_ && !conductor_.state().answers.empty())
        lines.push_back(savedLine());
    for (std::string& line : promptLines())
        lines.push_back(std::move(line));
    return lines;
}

std::vector<std::string> LineSession::proceed() {
    if (!mayProceed())
        return {};
    const bool waited = conductor_.prompt().kind == PromptKind::WaitingForPlan;
    if (auto went = conductor_.next(); !went)
        return {refused(went.error())};
    if (waited && conductor_.prompt().kind == PromptKind::WaitingForPlan)
        return {};
    return promptLines();
}

std::vector<std::string> LineSession::handle(std::string_view line) {
    if (line.find_first_not_of(" \t\r") == std::string_view::npos)
        return {};
    auto json = objectOf(line);
    if (!json)
        return {refused(json.error())};
    const std::string type = (*json)["type"].get<std::string>();
    const auto replyTo = [&](const Result<void>& done, std::vector<std::string> lines) {
        return done ? lines : std::vector<std::string>{refused(done.error())};
    };

    if (type == "answer") {
        const Prompt prompt = conductor_.prompt();
        if (prompt.kind != PromptKind::Trial)
            return {refused(badLine("No pair is on the stage."))};
        auto given = answerOf(*json, prompt.trial, conductor_.state().began.protocol.levels);
        if (!given)
            return {refused(given.error())};
        if (auto answered = conductor_.answer(*given); !answered)
            return {refused(answered.error())};
        return {savedLine()};
    }
    if (type == "note") {
        if (auto fields = onlyFields(*json, {"text"}); !fields)
            return {refused(fields.error())};
        if (!json->contains("text") || !(*json)["text"].is_string())
            return {refused(badLine("The note has no \"text\"."))};
        return replyTo(conductor_.note((*json)["text"].get<std::string>()), {lineOf({{"type", "noted"}})});
    }
    if (auto fields = onlyFields(*json, {}); !fields)
        return {refused(fields.error())};
    if (type == "undo") {
        const int trial = conductor_.state().answers.empty() ? 0 : conductor_.state().answers.back().trial;
        if (auto undone = conductor_.undo(); !undone)
            return {refused(undone.error())};
        std::vector<std::string> lines = {lineOf({{"type", "undone"}, {"trial", trial}})};
        for (std::string& prompt : promptLines())
            lines.push_back(std::move(prompt));
        return lines;
    }
    if (type == "pause")
        return replyTo(conductor_.pause("participant"), {lineOf({{"type", "paused"}})});
    if (type == "go on") {
        if (auto went = conductor_.goOn(); !went)
            return {refused(went.error())};
        return promptLines();
    }
    if (type == "stop") {
        if (auto stopped = conductor_.stop("participant"); !stopped)
            return {refused(stopped.error())};
        return promptLines();
    }
    return {refused(badLine("“" + type + "” is not a type of line.",
                            "The types are answer, undo, pause, go on, note and stop."))};
}

} // namespace whichway
