// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/report/markup.h"

#include <stdexcept>

namespace whichway {
namespace {

/// Characters that XML 1.0 does not allow at all (section 2.2) become U+FFFD.
QString escaped(const QString& text) {
    QString allowed = text;
    for (QChar& c : allowed)
        if ((c < QLatin1Char(' ') && c != QLatin1Char('\n') && c != QLatin1Char('\t')) ||
            c == QChar(0xfffe) || c == QChar(0xffff))
            c = QChar(0xfffd);
    return allowed.toHtmlEscaped();
}

} // namespace

Markup& Markup::open(const char* element, const QString& cssClass) {
    if (cssClass.isEmpty())
        return open(element, Attributes{});
    return open(element, {{"class", cssClass}});
}

Markup& Markup::open(const char* element, Attributes attributes) {
    content_ += QLatin1Char('<') + QLatin1String(element);
    for (const auto& [name, value] : attributes)
        content_ +=
            QLatin1Char(' ') + QLatin1String(name) + QLatin1String("=\"") + escaped(value) + QLatin1Char('"');
    content_ += QLatin1Char('>');
    open_.append(QLatin1String(element));
    return *this;
}

Markup& Markup::close() {
    if (open_.isEmpty())
        throw std::logic_error("no element is open");
    content_ += QLatin1String("</") + open_.takeLast() + QLatin1String(">\n");
    return *this;
}

Markup& Markup::text(const QString& text) {
    content_ += escaped(text);
    return *this;
}

Markup& Markup::line(const char* element, const QString& text, const QString& cssClass) {
    return open(element, cssClass).text(text).close();
}

Markup& Markup::drawing(const QString& svg) {
    content_ += svg + QLatin1Char('\n');
    return *this;
}

const QString& Markup::content() const {
    if (!open_.isEmpty())
        throw std::logic_error("an element is still open");
    return content_;
}

} // namespace whichway
