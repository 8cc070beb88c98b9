// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

// For the .cpp files of this room only: it pulls the whole JSON library in.

#include "core/study/protocol.h"

#include <nlohmann/json.hpp>
#include <stdexcept>
#include <string>

namespace whichway {

/// Keeps the order in which fields are written.
using Json = nlohmann::ordered_json;

/// One name of an enumeration's value; tables of these are the only place where the words stand.
template <typename E>
struct EnumWord {
    E value;
    const char* word;
};

template <typename E, std::size_t N>
Json enumToJson(E value, const EnumWord<E> (&words)[N]) {
    for (const auto& entry : words)
        if (entry.value == value)
            return entry.word;
    throw std::invalid_argument("an enumeration holds a value without a word");
}

/// @throws std::invalid_argument for a word that is not in the table.
template <typename E, std::size_t N>
E enumFromJson(const Json& json, const EnumWord<E> (&words)[N]) {
    const std::string word = json.get<std::string>();
    for (const auto& entry : words)
        if (word == entry.word)
            return entry.value;
    throw std::invalid_argument("unknown word “" + word + "”");
}

// Found by the library through their argument's type.
void to_json(Json& json, const Protocol& protocol);
void from_json(const Json& json, Protocol& protocol);

} // namespace whichway
