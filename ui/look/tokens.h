// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QColor>
#include <QFont>
#include <QPalette>

namespace whichway {

/// The colours of bench and pages. Every text colour has a contrast of at least 4.5 on sheet and ground,
/// every outline at least 3 (WCAG 2.2, 1.4.3 and 1.4.11).
struct Colours {
    QColor ground, sheet, raised;
    QColor ink, ink2, ink3; ///< text, secondary text, notes and disabled
    QColor line, edge;      ///< rules; outlines
    QColor accent, onAccent, soft;
    QColor warn, warnSoft, bad, badSoft;
    QColor series2, series3, series4; ///< the first series is the accent
    QColor ref;                       ///< not determined, histograms
};

enum class Theme { Light, Dark };

const Colours& coloursOf(Theme theme);
/// The colours that go with a palette made by `paletteOf`, so that no widget needs to be told the theme.
const Colours& coloursOf(const QPalette& palette);
QPalette paletteOf(Theme theme);

/// The stage's greys (R = G = B), the same in every theme.
namespace stage_grey {
inline constexpr QRgb kGround = 0xffa3a3a3, kButton = 0xffc4c4c4, kFloor = 0xffd2d2d2, kRoom = 0xffbebebe;
inline constexpr QRgb kWall = 0xff3c3c3c, kPerson = 0xff4a4a4a, kTrail = 0xff2e2e2e,
                      kPersonTrail = 0xff6e6e6e;
inline constexpr QRgb kRobot = 0xffffffff, kEdge = 0xff111111, kText = 0xff0e0e0e, kDisabledText = 0xff2b2b2b;
inline constexpr QRgb kDisabledEdge = 0xff4e4e4e, kTrack = 0xff555555, kFurniture = 0xffcecece;
inline constexpr QRgb kFurnitureEdge = 0xff7e7e7e;
} // namespace stage_grey

/// Distances in px at 96 dpi.
namespace space {
inline constexpr int k4 = 4, k8 = 8, k12 = 12, k16 = 16, k24 = 24, k32 = 32, k48 = 48;
inline constexpr int kRadius = 3, kControl = 32, kRow = 30, kRoute = 56, kFoot = 36, kActionBar = 60;
} // namespace space

/// Type, as factors of the system font, so that all text grows with it.
enum class TextRole { Title, Statement, Heading, Text, Label, Note };

QFont fontOf(TextRole role);

/// The stage's type in px at 96 dpi and the system's usual size: grows with the system font, never below 19.
QFont stageFont(double pixels);
/// How much larger than usual the system font is, at least 1.
double stageScale();

} // namespace whichway
