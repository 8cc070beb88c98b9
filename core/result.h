// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>
#include <utility>
#include <variant>
#include <vector>

namespace whichway {

/// Where in a file something is: lines and columns count from 1, columns in bytes; 0 means "not known".
struct Place {
    std::string file = {}; ///< As the reader would name it, relative to the study folder where there is one.
    int line = 0;
    int column = 0;
    bool operator==(const Place&) const = default;
};

/// The world's fault (a file, a format, no convergence), as a value.
struct Error {
    std::string code = {}; ///< Stable, e.g. "study.unknown-key"; translations hang on it.
    Place place = {};
    std::string message = {};             ///< What happened, one English sentence.
    std::string remedy = {};              ///< What to do, one English sentence, or empty.
    std::vector<std::string> values = {}; ///< What `message` speaks of, in order, for translations.
    bool operator==(const Error&) const = default;
};

/// "study.toml:41:12: “travl_time” is not a feature. Did you mean “travel_time”?"
std::string describe(const Error& error);

/// Code of an operation that was asked to stop. It is an outcome, not a failure.
inline constexpr const char* kCancelled = "cancelled";

/// A value or the reason why there is none.
template <typename T>
class [[nodiscard]] Result {
public:
    Result(T value) : content_(std::in_place_index<0>, std::move(value)) {}
    Result(Error error) : content_(std::in_place_index<1>, std::move(error)) {}

    bool ok() const { return content_.index() == 0; }
    explicit operator bool() const { return ok(); }

    const T& value() const& { return std::get<0>(content_); }
    T& value() & { return std::get<0>(content_); }
    T&& value() && { return std::get<0>(std::move(content_)); }
    const T& operator*() const& { return value(); }
    T& operator*() & { return value(); }
    T operator*() && { return std::get<0>(std::move(content_)); } ///< by value: safe in `for (x : *make())`
    const T* operator->() const { return &value(); }
    T* operator->() { return &value(); }

    const Error& error() const { return std::get<1>(content_); }

private:
    std::variant<T, Error> content_;
};

/// Success or the reason why not.
template <>
class [[nodiscard]] Result<void> {
public:
    Result() = default;
    Result(Error error) : content_(std::move(error)) {}

    bool ok() const { return content_.index() == 0; }
    explicit operator bool() const { return ok(); }
    const Error& error() const { return std::get<1>(content_); }

private:
    std::variant<std::monostate, Error> content_;
};

} // namespace whichway
