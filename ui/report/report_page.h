// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QString>

namespace whichway {

/// The report's page under construction: every text that comes in is escaped here, so that none can slip
/// through.
class ReportPage {
public:
    void heading(const QString& text);
    void paragraph(const QString& text, const QString& style = {});
    void raw(const QString& markup) { body_ += markup; }
    void openColumns() { body_ += QStringLiteral("<div class=\"columns\">"); }
    void nextColumn() { body_ += QStringLiteral("</div><div>"); }
    void openColumn() { body_ += QStringLiteral("<div>"); }
    void closeColumns() { body_ += QStringLiteral("</div></div>"); }
    void openTable(const QStringList& heads);
    void row(const QStringList& cells);
    void closeTable() { body_ += QStringLiteral("</tbody></table>"); }

    /// The whole page, with its style.
    QByteArray html(const QString& title, const QString& language) const;

private:
    QString body_;
};

} // namespace whichway
