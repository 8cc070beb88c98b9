// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/toml_table.h"

#include "core/files/nearest_name.h"

#include <algorithm>
#include <cmath>
#include <set>
#include <toml++/toml.h>

namespace whichway {
namespace {

constexpr const char* kTypeWords[] = {"nothing",  "a table",       "a list", "a text", "a whole number",
                                      "a number", "true or false", "a date", "a time", "a date and time"};

std::string wordFor(toml::node_type type) {
    const auto index = static_cast<std::size_t>(type);
    return index < std::size(kTypeWords) ? kTypeWords[index] : "something else";
}

} // namespace

struct TomlTable::Document {
    std::string file;
    toml::table root;
    std::vector<Error>* problems = nullptr;
};

struct TomlTable::View {
    std::shared_ptr<Document> document;
    const toml::table* table = nullptr;
    std::set<std::string> known;

    Place place(const toml::source_region& region) const {
        return {.file = document->file,
                .line = static_cast<int>(region.begin.line),
                .column = static_cast<int>(region.begin.column)};
    }

    void report(const std::string& code, const Place& at, const std::string& message,
                const std::string& remedy, std::vector<std::string> values = {}) const {
        document->problems->push_back(
            {.code = code, .place = at, .message = message, .remedy = remedy, .values = std::move(values)});
    }

    const toml::node* find(const std::string& key, bool required) {
        known.insert(key);
        const toml::node* node = table->get(key);
        if (!node && required)
            report("toml.missing-key", place(table->source()), "The key “" + key + "” is missing.",
                   "Add it to this table.", {key});
        return node;
    }

    void wrongType(const std::string& key, const toml::node& node, const std::string& wanted) const {
        report("toml.type", place(node.source()),
               "“" + key + "” is " + wordFor(node.type()) + ", and " + wanted + " is wanted.", "",
               {key, wanted});
    }

    std::optional<double> finite(const std::string& key, const toml::node& node) const {
        const auto value = node.value<double>();
        if (!value || !node.is_number()) {
            wrongType(key, node, "a number");
            return std::nullopt;
        }
        if (!std::isfinite(*value)) {
            report("toml.not-finite", place(node.source()), "“" + key + "” is not a finite number.", "",
                   {key});
            return std::nullopt;
        }
        return value;
    }
};

TomlTable::TomlTable(std::shared_ptr<View> view) : view_(std::move(view)) {}

std::optional<TomlTable> TomlTable::parse(std::string_view content, const std::string& file,
                                          std::vector<Error>& problems) {
    auto document = std::make_shared<Document>();
    document->file = file;
    document->problems = &problems;
    try { // the parser reports by throwing; this is where that ends
        document->root = toml::parse(content, std::string_view(file));
    } catch (const toml::parse_error& error) {
        const bool encoding = std::string(error.description()).find("utf-8") != std::string::npos;
        problems.push_back({.code = encoding ? "toml.encoding" : "toml.syntax",
                            .place = {.file = file,
                                      .line = static_cast<int>(error.source().begin.line),
                                      .column = static_cast<int>(error.source().begin.column)},
                            .message = "This is not TOML: " + std::string(error.description()) + ".",
                            .remedy = "Mend the line.",
                            .values = {std::string(error.description())}});
        return std::nullopt;
    }
    auto view = std::make_shared<View>();
    view->table = &document->root;
    view->document = std::move(document);
    return TomlTable(std::move(view));
}

bool TomlTable::has(const std::string& key) const {
    return view_->table->contains(key);
}

Place TomlTable::placeOf(const std::string& key) const {
    const toml::node* node = view_->table->get(key);
    return view_->place(node ? node->source() : view_->table->source());
}

std::string TomlTable::text(const std::string& key, std::optional<std::string> otherwise) {
    const toml::node* node = view_->find(key, !otherwise);
    if (!node)
        return otherwise.value_or("");
    if (!node->is_string()) {
        view_->wrongType(key, *node, "a text");
        return otherwise.value_or("");
    }
    return *node->value<std::string>();
}

double TomlTable::number(const std::string& key, std::optional<double> otherwise) {
    const toml::node* node = view_->find(key, !otherwise);
    if (!node)
        return otherwise.value_or(0);
    return view_->finite(key, *node).value_or(otherwise.value_or(0));
}

long long TomlTable::integer(const std::string& key, std::optional<long long> otherwise) {
    const toml::node* node = view_->find(key, !otherwise);
    if (!node)
        return otherwise.value_or(0);
    if (!node->is_integer()) {
        view_->wrongType(key, *node, "a whole number");
        return otherwise.value_or(0);
    }
    return *node->value<long long>();
}

bool TomlTable::flag(const std::string& key, std::optional<bool> otherwise) {
    const toml::node* node = view_->find(key, !otherwise);
    if (!node)
        return otherwise.value_or(false);
    if (!node->is_boolean()) {
        view_->wrongType(key, *node, "true or false");
        return otherwise.value_or(false);
    }
    return *node->value<bool>();
}

std::vector<std::string> TomlTable::texts(const std::string& key) {
    std::vector<std::string> found;
    const toml::node* node = view_->find(key, false);
    if (!node)
        return found;
    const toml::array* list = node->as_array();
    if (!list) {
        view_->wrongType(key, *node, "a list of texts");
        return found;
    }
    for (const toml::node& item : *list) {
        if (item.is_string())
            found.push_back(*item.value<std::string>());
        else
            view_->wrongType(key, item, "a text");
    }
    return found;
}

std::vector<double> TomlTable::numbers(const std::string& key, std::size_t length) {
    std::vector<double> found;
    const toml::node* node = view_->find(key, false);
    if (!node)
        return found;
    const toml::array* list = node->as_array();
    if (!list || (length > 0 && list->size() != length)) {
        view_->wrongType(key, *node,
                         length > 0 ? "a list of " + std::to_string(length) + " numbers"
                                    : "a list of numbers");
        return found;
    }
    for (const toml::node& item : *list)
        found.push_back(view_->finite(key, item).value_or(0));
    return found;
}

std::vector<std::vector<double>> TomlTable::rows(const std::string& key, std::size_t length) {
    std::vector<std::vector<double>> found;
    const toml::node* node = view_->find(key, false);
    if (!node)
        return found;
    const toml::array* list = node->as_array();
    if (!list) {
        view_->wrongType(key, *node, "a list of lists of numbers");
        return found;
    }
    for (const toml::node& item : *list) {
        const toml::array* row = item.as_array();
        if (!row || row->size() != length) {
            view_->wrongType(key, item, "a list of " + std::to_string(length) + " numbers");
            continue;
        }
        std::vector<double> values;
        for (const toml::node& value : *row)
            values.push_back(view_->finite(key, value).value_or(0));
        found.push_back(std::move(values));
    }
    return found;
}

std::optional<TomlTable> TomlTable::table(const std::string& key) {
    const toml::node* node = view_->find(key, false);
    if (!node)
        return std::nullopt;
    if (!node->is_table()) {
        view_->wrongType(key, *node, "a table");
        return std::nullopt;
    }
    auto view = std::make_shared<View>();
    view->document = view_->document;
    view->table = node->as_table();
    return TomlTable(std::move(view));
}

std::vector<TomlTable> TomlTable::tables(const std::string& key) {
    std::vector<TomlTable> found;
    const toml::node* node = view_->find(key, false);
    if (!node)
        return found;
    const toml::array* list = node->as_array();
    if (!list) {
        view_->wrongType(key, *node, "a list of tables");
        return found;
    }
    for (const toml::node& item : *list) {
        if (!item.is_table()) {
            view_->wrongType(key, item, "a table");
            continue;
        }
        auto view = std::make_shared<View>();
        view->document = view_->document;
        view->table = item.as_table();
        found.push_back(TomlTable(std::move(view)));
    }
    return found;
}

std::vector<std::string> TomlTable::keys() const {
    // The library sorts its keys; the order of the file is that of their places.
    std::vector<std::pair<toml::source_position, std::string>> placed;
    for (const auto& [key, node] : *view_->table)
        placed.emplace_back(key.source().begin, std::string(key.str()));
    std::sort(placed.begin(), placed.end(), [](const auto& a, const auto& b) {
        return std::pair(a.first.line, a.first.column) < std::pair(b.first.line, b.first.column);
    });
    std::vector<std::string> keys;
    for (auto& [position, key] : placed)
        keys.push_back(std::move(key));
    return keys;
}

void TomlTable::report(const std::string& code, const Place& place, const std::string& message,
                       const std::string& remedy) {
    view_->report(code, place, message, remedy);
}

void TomlTable::refuseOthers() {
    const std::vector<std::string> known(view_->known.begin(), view_->known.end());
    for (const auto& [key, node] : *view_->table) {
        const std::string name(key.str());
        if (view_->known.contains(name))
            continue;
        const std::string nearest = nearestName(name, known);
        view_->report("toml.unknown-key", view_->place(key.source()),
                      "“" + name + "” is not a key of this table.",
                      nearest.empty() ? "Remove it." : "Did you mean “" + nearest + "”?", {name, nearest});
    }
}

} // namespace whichway
