// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QString>

namespace whichway {

/// The report's style sheet: the tokens of the light theme, laid out for A4 and for any screen.
QString reportStyle();

} // namespace whichway
