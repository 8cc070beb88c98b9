// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/commands/replay.h"

#include "app/terminal.h"
#include "core/session/audit.h"

#include <fmt/core.h>

namespace whichway {
namespace {

const char* wordsFor(Sameness sameness) {
    switch (sameness) {
    case Sameness::Same:
        return "the same";
    case Sameness::WithinMonteCarlo:
        return "within Monte Carlo error";
    case Sameness::Different:
        return "DIFFERENT";
    case Sameness::NotThere:
        return "nothing to compare";
    }
    return "";
}

void sayPart(const char* name, Sameness sameness, const std::string& detail,
             const std::vector<std::string>& differences) {
    say(fmt::format("{:<10} {}{}", name, wordsFor(sameness), detail));
    for (const std::string& difference : differences)
        say("           " + difference);
}

} // namespace

int replay(const std::string& session) {
    const RealFileSystem files;
    const auto folder = openSessionFolder(files, session);
    if (!folder)
        return complain(folder.error());
    const auto audit = auditSession(files, *folder);
    if (!audit)
        return complain(audit.error());

    say(fmt::format("{:<10} intact, {} events", "Journal", audit->events));
    if (audit->tornBytes > 0)
        say(fmt::format("           {} bytes of an event that was never completed follow the last one",
                        audit->tornBytes));
    sayPart("Trials", audit->trials, "", audit->trialDifferences);
    sayPart("Plans", audit->planned, fmt::format(" ({} recomputed)", audit->plans), audit->planDifferences);
    sayPart("Estimates", audit->estimates, audit->estimates == Sameness::Same ? ", to the last bit" : "",
            audit->estimateDifferences);
    return audit->holds() ? kDone : kInputAtFault;
}

} // namespace whichway
