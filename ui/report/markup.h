// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QString>
#include <QStringList>
#include <initializer_list>
#include <utility>

namespace whichway {

/// Writes HTML that is well-formed XML too. Whatever comes from a study or a session goes through `text` or
/// an attribute and is escaped there.
class Markup {
public:
    using Attributes = std::initializer_list<std::pair<const char*, QString>>;

    Markup& open(const char* element, const QString& cssClass = {});
    Markup& open(const char* element, Attributes attributes);
    Markup& close(); ///< the element opened last
    Markup& text(const QString& text);
    /// A whole element around a text.
    Markup& line(const char* element, const QString& text, const QString& cssClass = {});
    /// A drawing that ui/charts made; nothing else may come in unescaped.
    Markup& drawing(const QString& svg);

    /// @throws std::logic_error if an element is still open.
    const QString& content() const;

private:
    QString content_;
    QStringList open_;
};

} // namespace whichway
