// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/report/report_style.h"

#include "ui/look/tokens.h"

namespace whichway {
namespace {

// %1 ink, %2 ink2, %3 ink3, %4 line, %5 edge, %6 warn, %7 warnSoft, %8 bad, %9 badSoft
// Plain characters only: no quotes, ampersands or angle brackets, which HTML and XML read differently here.
constexpr const char* kStyle = R"(
@page { size: A4; margin: 18mm; }
* { box-sizing: border-box; }
html { background: #fff; }
body { width: 174mm; margin: 14mm auto; color: %1; font-family: Noto Sans, system-ui, sans-serif;
       font-size: 9.5pt; line-height: 1.45; print-color-adjust: exact; font-variant-numeric: tabular-nums; }
header { display: flex; justify-content: space-between; align-items: flex-end; border-bottom: 1.5px solid %1;
         padding-bottom: 3mm; margin-bottom: 5mm; }
h1 { font-size: 18pt; font-weight: normal; line-height: 1.2; margin: 0; }
header p { margin: 0; color: %2; }
header .aside { text-align: right; color: %3; font-size: 8.8pt; }
h2 { font-size: 10.5pt; margin: 0 0 2mm 0; line-height: 1.3; break-after: avoid; }
h2 small { font-size: 8.8pt; font-weight: normal; color: %3; margin-left: 2mm; }
p { margin: 0 0 2mm 0; }
section { margin: 0 0 6mm 0; break-inside: avoid; }
section.long { break-inside: auto; }
.pair { display: grid; grid-template-columns: 1fr 1fr; column-gap: 6mm; }
.side { color: %3; font-size: 8.8pt; }
svg + .side, table + .side, .pair + .side, svg + p { margin-top: 2.5mm; }
.marks { margin: 0 0 4mm 0; }
.chip { display: inline-block; border: 1px solid; border-radius: 3px; padding: 0.5mm 2mm; margin: 0 2mm 1mm 0;
        font-size: 8.8pt; }
.chip.warn { color: %6; background: %7; border-color: %6; }
.chip.bad { color: %8; background: %9; border-color: %8; }
svg { display: block; max-width: 100%; height: auto; }
svg text { font-family: inherit; }
.courses { display: grid; grid-template-columns: repeat(4, 1fr); gap: 3mm; }
table { border-collapse: collapse; width: 100%; font-size: 8.8pt; }
th { text-align: left; font-weight: normal; color: %3; padding: 0.8mm 3mm 0.8mm 0; vertical-align: bottom; }
td { padding: 0.8mm 3mm 0.8mm 0; border-top: 1px solid %4; vertical-align: top; }
tr { break-inside: avoid; }
thead { display: table-header-group; }
td:last-child, th:last-child { padding-right: 0; }
td:last-child { color: %3; }
table.trades td { color: %3; white-space: nowrap; }
table.trades td:first-child { font-weight: bold; color: %1; }
table.trades td:nth-child(2) { color: %1; white-space: normal; }
table.trades tr.open td { color: %3; font-weight: normal; }
table.checks td:nth-child(-n+2) { color: %1; }
table.checks td:first-child, table.checks td:last-child { white-space: nowrap; }
table.numbers td, table.log td { color: %1; white-space: nowrap; }
table.numbers td:first-child { white-space: normal; }
table.numbers td:not(:first-child), table.numbers th:not(:first-child) { text-align: right; }
table.log { font-size: 8pt; line-height: 1.35; }
table.log td { padding-top: 0.35mm; padding-bottom: 0.35mm; }
table.log td:nth-child(n+7), table.log th:nth-child(n+7) { text-align: right; }
figure { margin: 0; }
figcaption { margin-top: 1mm; }
figcaption span { color: %2; display: block; }
ul { margin: 0; padding-left: 4mm; }
li { margin: 0 0 1mm 0; }
footer { border-top: 1px solid %5; padding-top: 3mm; }
footer .origin { color: %3; font-size: 8pt; overflow-wrap: anywhere; margin-top: 3mm; }
@media screen and (max-width: 190mm) { body { width: auto; margin: 6mm; }
  .pair, .courses { grid-template-columns: 1fr; row-gap: 6mm; } }
@media print { body { margin: 0; width: auto; } }
)";

} // namespace

QString reportStyle() {
    const Colours& colours = coloursOf(Theme::Light);
    return QString::fromLatin1(kStyle).arg(colours.ink.name(), colours.ink2.name(), colours.ink3.name(),
                                           colours.line.name(), colours.edge.name(), colours.warn.name(),
                                           colours.warnSoft.name(), colours.bad.name(),
                                           colours.badSoft.name());
}

} // namespace whichway
