// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>

namespace whichway {

/// `whichway check`: the problems of a study or, if there are none, what its library can answer and its
/// feature table. @param featuresFile a table to use in place of features.csv, or empty. @return the exit
/// code
int check(const std::string& study, const std::string& featuresFile);

} // namespace whichway
