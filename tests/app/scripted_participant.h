// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "tests/app/program.h"

#include <map>
#include <memory>
#include <nlohmann/json.hpp>
#include <optional>
#include <string>
#include <utility>
#include <vector>

namespace whichway::testing_support {

using Json = nlohmann::json;

/// An outside program that answers over lines of JSON, and remembers what was confirmed to it.
class ScriptedParticipant {
public:
    explicit ScriptedParticipant(std::vector<std::string> arguments,
                                 const std::vector<std::string>& environment = {})
        : child_(std::make_unique<ChildProcess>(programWith(std::move(arguments)), environment)) {}

    ChildProcess& child() { return *child_; }

    /// The next line as an object; nothing at the end of the output. Keeps the books of what is saved.
    std::optional<Json> hear() {
        const auto line = child_->readLine();
        if (!line)
            return std::nullopt;
        Json said = Json::parse(*line);
        if (said["type"] == "saved")
            confirmed[said["trial"].get<int>()] = said["digest"].get<std::string>();
        else if (said["type"] == "undone")
            confirmed.erase(said["trial"].get<int>());
        heard.push_back(said);
        return said;
    }

    /// The next line of one of these types, over all others.
    std::optional<Json> hearOf(const std::vector<std::string>& types) {
        for (auto said = hear(); said; said = hear())
            for (const std::string& type : types)
                if ((*said)["type"] == type)
                    return said;
        return std::nullopt;
    }
    std::optional<Json> hearPair() { return hearOf({"pair", "practice"}); }

    bool say(const Json& line) { return child_->writeLine(line.dump()); }

    /// A fixed opinion about every pair, so that a test can tell a confused answer from a right one.
    static Json answerTo(const Json& pair) {
        const bool left = pair["left"].get<std::string>() < pair["right"].get<std::string>();
        return {{"type", "answer"},
                {"trial", pair["trial"]},
                {"choice", left ? "left" : "right"},
                {"confidence", 1 + pair["trial"].get<int>() % static_cast<int>(pair["confidence"].size())},
                {"response_time", 2.5}};
    }
    static int numberOf(const Json& answer) {
        const int confidence = answer["confidence"].get<int>();
        return answer["choice"] == "left" ? confidence : -confidence;
    }

    std::map<int, std::string> confirmed = {}; ///< digest of each trial's standing answer
    std::vector<Json> heard = {};

private:
    std::unique_ptr<ChildProcess> child_;
};

} // namespace whichway::testing_support
