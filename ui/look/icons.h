// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/events.h"

#include <QColor>
#include <QIcon>
#include <QPainterPath>
#include <QRectF>

class QPainter;

namespace whichway {

enum class Icon { Way, Pause, Stop, Note, Replay, Undo, Eye, Shut, Warn, Bad, Ok, Lock, Person, More, File };

/// Draws an icon of the 20 x 20 grid into `rect` in one colour.
void drawIcon(QPainter& painter, const QRectF& rect, Icon icon, const QColor& colour);
QIcon iconOf(Icon icon, const QColor& colour);

/// The shape of a trial's kind, about (0, 0), `size` across: practice a circle, main a square, held-out a
/// diamond, repeat two triangles that meet, catch a triangle, identical two equal bars.
QPainterPath trialMark(TrialKind kind, double size);
/// "main", "held-out", …
QString trialKindText(TrialKind kind);

} // namespace whichway
