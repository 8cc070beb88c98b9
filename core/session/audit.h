// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"
#include "core/journal/session_folder.h"
#include "core/result.h"

#include <cstdint>
#include <stop_token>
#include <string>
#include <vector>

namespace whichway {

enum class Sameness {
    Same,             ///< to the last bit
    WithinMonteCarlo, ///< every mean within 4 combined Monte Carlo standard errors
    Different,
    NotThere ///< there is nothing to compare
};

/// What a replay of a session found. The hash chain shows accidental damage and careless edits, not malice.
struct SessionAudit {
    std::uint64_t events = 0;
    std::uint64_t tornBytes = 0; ///< a record that was being written when the program ended; no damage
    Sameness trials = Sameness::NotThere; ///< the schedule drawn again, and what was shown against it
    std::vector<std::string> trialDifferences = {};
    int plans = 0;
    Sameness planned = Sameness::NotThere; ///< every adopted plan computed again from its request
    std::vector<std::string> planDifferences = {};
    Sameness estimates = Sameness::NotThere; ///< the estimate computed again
    std::vector<std::string> estimateDifferences = {};

    bool holds() const {
        return trials != Sameness::Different && planned != Sameness::Different &&
               estimates != Sameness::Different;
    }
};

/// Rebuilds a session from its journal alone and compares it with what the journal says happened.
/// @return the journal's error ("journal.corrupt", "journal.order", …) if it is not intact; kCancelled.
Result<SessionAudit> auditSession(const FileSystem& files, const SessionFolder& folder,
                                  std::stop_token stop = {});

} // namespace whichway
