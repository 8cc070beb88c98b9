// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/commands/check.h"
#include "app/commands/conduct.h"
#include "app/commands/make_library.h"
#include "app/commands/replay.h"
#include "app/commands/report.h"
#include "app/commands/windows.h"
#include "app/terminal.h"

#include <CLI/CLI.hpp>
#include <map>
#include <string>

namespace {

using namespace whichway;

/// Everything that may stand on the command line.
struct CommandLine {
    CLI::App program =
        CLI::App("Learns what a person wants of a robot's motion from choices between two motions.\n"
                 "Without a command it opens the window.",
                 "whichway");
    std::string study = {}, features = {}, session = {}, recipe = {}, folder = {};
    ConductOptions conducting = {};
    CLI::App* checking = nullptr;
    CLI::App* conductingCommand = nullptr;
    CLI::App* reporting = nullptr;
    CLI::App* replaying = nullptr;
    CLI::App* making = nullptr;
    CLI::Option* agreement = nullptr;

    CommandLine() {
        program.set_help_flag("-h,--help", "Show this help");
        program.set_version_flag("--version", WHICHWAY_VERSION, "Show the version");
        program.require_subcommand(0, 1);
        program.add_option("STUDY", study, "Study folder to open in the window");
        addCheck();
        addConduct();
        addReport();
        addReplay();
        addMakeLibrary();
    }

    /// @throws CLI::ValidationError for an option that the chosen source of answers would ignore
    void refuseWhatHasNoEffect() const {
        const bool simulated = conducting.answers == AnswersFrom::Simulated;
        if (agreement->count() > 0 && !simulated)
            throw CLI::ValidationError("--agreement", "is for --answers simulated only");
        if (conducting.interval && conducting.answers != AnswersFrom::Stdio)
            throw CLI::ValidationError("--interval", "is for --answers stdio only");
    }

private:
    void addCheck() {
        checking = program.add_subcommand("check", "Say what is wrong with a study, and what its library is");
        checking->add_option("STUDY", study, "Study folder")->required();
        checking->add_option("--features", features, "Use this feature table in place of features.csv");
    }

    void addConduct() {
        static const std::map<std::string, AnswersFrom> kSources = {{"screen", AnswersFrom::Screen},
                                                                    {"simulated", AnswersFrom::Simulated},
                                                                    {"stdio", AnswersFrom::Stdio}};
        CLI::App* command = program.add_subcommand("conduct", "Conduct a session");
        command->add_option("STUDY", conducting.study, "Study folder")->required();
        command
            ->add_option("--participant", conducting.participant,
                         "The participant's code; - reads it from the first line of standard input")
            ->required();
        command
            ->add_option_function<std::string>(
                "--answers", [this](const std::string& source) { conducting.answers = kSources.at(source); },
                "Where answers come from: screen (default), simulated (a pilot session with a simulated "
                "participant), or stdio (lines of JSON)")
            ->check(CLI::IsMember({"screen", "simulated", "stdio"}));
        command->add_option("--language", conducting.language, "Language of the texts; default: the first");
        command->add_option_function<std::uint64_t>(
            "--seed", [this](const std::uint64_t& seed) { conducting.seed = seed; },
            "Seed of the schedule, the plans and the simulated participant; default: by chance");
        agreement =
            command->add_option("--agreement", conducting.agreement,
                                "Share of random pairs on which the simulated participant gives the same "
                                "answer twice, default 0.85");
        agreement->check(CLI::Range(0.51, 0.999));
        command
            ->add_option_function<double>(
                "--interval", [this](const double& seconds) { conducting.interval = seconds; },
                "Seconds between a saved answer and the next pair, for stdio; default: the study's")
            ->check(CLI::Range(0.0, 60.0));
        command->add_flag("--pilot", conducting.pilot, "A pilot session, kept apart from the participants'");
        CLI::Option* resume =
            command->add_flag("--resume", conducting.resume, "Take up this participant's unfinished session");
        CLI::Option* anew = command->add_flag("--anew", conducting.anew,
                                              "Begin another session though this participant has an "
                                              "unfinished one");
        resume->excludes(anew);
        conductingCommand = command;
    }

    void addReport() {
        reporting = program.add_subcommand("report", "Write a session's report, trial table and weights");
        reporting->add_option("SESSION", session, "Session folder")->required();
        reporting->add_option("--to", folder, "Folder to write into")->required();
    }

    void addReplay() {
        replaying = program.add_subcommand("replay", "Rebuild a session from its journal and compare");
        replaying->add_option("SESSION", session, "Session folder")->required();
    }

    void addMakeLibrary() {
        making = program.add_subcommand("make-library", "Make the motions of a recipe");
        making->add_option("RECIPE", recipe, "Recipe file (TOML)")->required();
        making->add_option("--to", folder, "Folder to write into")->required();
    }
};

} // namespace

int main(int argc, char** argv) {
    CommandLine given;
    try {
        given.program.parse(argc, argv);
        given.refuseWhatHasNoEffect();
    } catch (const CLI::Success& wish) { // help or version
        return given.program.exit(wish);
    } catch (const CLI::ParseError& error) {
        complain(std::string("whichway: ") + error.what());
        complain("Say `whichway --help`, or `whichway COMMAND --help`, for what it understands.");
        return kWrongUsage;
    }
    if (given.checking->parsed())
        return check(given.study, given.features);
    if (given.conductingCommand->parsed())
        return conduct(given.conducting, argc, argv);
    if (given.reporting->parsed())
        return report(given.session, given.folder, argc, argv);
    if (given.replaying->parsed())
        return replay(given.session);
    if (given.making->parsed())
        return makeLibrary(given.recipe, given.folder);
    return openWindow(given.study, argc, argv);
}
