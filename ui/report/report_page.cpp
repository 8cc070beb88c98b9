// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/report/report_page.h"

#include <QStringList>

namespace whichway {
namespace {

constexpr const char* kStyle = R"(
:root { --ink: #1A201E; --ink2: #4A5451; --ink3: #5E6865; --line: #CDD3D0; --warn: #7A4F00; --warnsoft: #F5EAD0; }
@page { size: A4; margin: 18mm; }
* { box-sizing: border-box; }
body { margin: 0 auto; padding: 32px 24px; max-width: 800px; background: #fff; color: var(--ink);
  font: 14px/1.5 "Noto Sans", "DejaVu Sans", sans-serif; font-variant-numeric: tabular-nums; }
header { border-bottom: 2px solid var(--ink); padding-bottom: 12px; margin-bottom: 20px; display: flex;
  justify-content: space-between; align-items: flex-end; gap: 24px; }
h1 { font-size: 28px; font-weight: 400; line-height: 1.2; margin: 0 0 4px; }
h2 { font-size: 15px; margin: 28px 0 8px; }
p { margin: 0 0 10px; } .note { color: var(--ink3); font-size: 12.5px; } .side { text-align: right; }
.mark { background: var(--warnsoft); color: var(--warn); padding: 8px 12px; border-radius: 3px; }
.columns { display: grid; grid-template-columns: 1fr 1fr; gap: 32px; }
table { border-collapse: collapse; width: 100%; }
th { text-align: left; font-weight: 400; color: var(--ink3); }
th, td { padding: 5px 8px 5px 0; border-bottom: 1px solid var(--line); vertical-align: top; }
svg { display: block; width: 100%; height: auto; }
.caution { border-top: 1px solid var(--ink); margin-top: 32px; padding-top: 10px; font-size: 12.5px; }
.hash { overflow-wrap: anywhere; }
@media print { body { padding: 0; max-width: none; } h2, table, svg { break-inside: avoid; } h2 { break-after: avoid; } }
@media (max-width: 640px) { .columns { grid-template-columns: 1fr; } header { display: block; } .side { text-align: left; } }
)";

} // namespace

void ReportPage::heading(const QString& text) {
    body_ += QStringLiteral("<h2>%1</h2>").arg(text.toHtmlEscaped());
}

void ReportPage::paragraph(const QString& text, const QString& style) {
    body_ += style.isEmpty() ? QStringLiteral("<p>%1</p>").arg(text.toHtmlEscaped())
                             : QStringLiteral("<p class=\"%1\">%2</p>").arg(style, text.toHtmlEscaped());
}

void ReportPage::openTable(const QStringList& heads) {
    body_ += QStringLiteral("<table>");
    if (!heads.isEmpty()) {
        body_ += QStringLiteral("<thead><tr>");
        for (const QString& head : heads)
            body_ += QStringLiteral("<th scope=\"col\">%1</th>").arg(head.toHtmlEscaped());
        body_ += QStringLiteral("</tr></thead>");
    }
    body_ += QStringLiteral("<tbody>");
}

void ReportPage::row(const QStringList& cells) {
    body_ += QStringLiteral("<tr>");
    for (const QString& cell : cells)
        body_ += QStringLiteral("<td>%1</td>").arg(cell.toHtmlEscaped());
    body_ += QStringLiteral("</tr>");
}

QByteArray ReportPage::html(const QString& title, const QString& language) const {
    const QString page =
        QStringLiteral("<!DOCTYPE html>\n<html xmlns=\"http://www.w3.org/1999/xhtml\" lang=\"%1\">"
                       "<head><meta charset=\"utf-8\"/><title>%2</title><style>%3</style></head>"
                       "<body>%4</body></html>\n");
    return page.arg(language.toHtmlEscaped(), title.toHtmlEscaped(), QString::fromUtf8(kStyle), body_)
        .toUtf8();
}

} // namespace whichway
