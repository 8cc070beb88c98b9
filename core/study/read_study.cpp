// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/file_system.h"
#include "core/motion/measures.h"
#include "core/motion/scene_file.h"
#include "core/motion/trajectory_file.h"
#include "core/study/features_file.h"
#include "core/study/library_file.h"
#include "core/study/protocol_hash.h"
#include "core/study/study.h"
#include "core/study/study_checks.h"
#include "core/study/study_file.h"
#include "core/study/study_folder.h"

#include <algorithm>
#include <cmath>
#include <fmt/format.h>
#include <map>
#include <optional>
#include <tuple>

namespace whichway {

namespace {

constexpr const char* kStudyFile = "study.toml";
constexpr const char* kLibraryFile = "library.csv";
constexpr const char* kFeaturesFile = "features.csv";
constexpr std::size_t kProblems = 500;
constexpr std::size_t kMessageBytes = 600;

/// Cuts a text that hostile content has made long, between code points.
void clip(std::string& text) {
    if (text.size() <= kMessageBytes)
        return;
    std::size_t end = kMessageBytes;
    while (end > 0 && (static_cast<unsigned char>(text[end]) & 0xC0) == 0x80)
        --end;
    text.resize(end);
    text += "…";
}

/// Reads one study folder, file by file. Every step goes on after problems as far as its input is there, so
/// that all of them are found at once.
class StudyReader {
public:
    StudyReader(const FileSystem& files, const std::string& folder, const std::string& featuresFile)
        : files_(files), folder_(files, folder), path_(folder), featuresFile_(featuresFile) {}

    StudyReading read() {
        const EntryKind kind = files_.kind(path_);
        if (kind == EntryKind::Missing || kind == EntryKind::File) {
            StudyReading reading;
            reading.problems.push_back({"study.no-folder",
                                        {path_, 0, 0},
                                        "There is no study folder here.",
                                        "Name the folder that holds study.toml.",
                                        {path_}});
            return reading;
        }
        readStudyFile();
        readScenes();
        readTrajectories();
        readLibrary();
        readFeatures();
        if (studyFileRead_ && libraryRead_) {
            checkPairs(study_, library_, names_, problems_);
            if (libraryWhole_) {
                checkLibrarySize(study_, mainMotions_.size(), problems_);
                makeTable();
            }
        }
        StudyReading reading;
        if (problems_.empty())
            reading.study = assembled();
        else
            reading.problems = inOrder();
        return reading;
    }

private:
    void readStudyFile() {
        const Result<std::string> content = folder_.read(kStudyFile);
        if (!content) {
            problems_.push_back(content.error());
            return;
        }
        hash_.addFile(kStudyFile, *content);
        study_ = parseStudyFile(*content, kStudyFile, problems_);
        studyFileRead_ = study_.isToml;
    }

    void readScenes() {
        for (std::size_t i = 0; i < study_.scenePaths.size(); ++i) {
            const std::string& path = study_.scenePaths[i];
            const Result<std::string> content = folder_.read(path);
            if (!content) {
                problems_.push_back(content.error());
                continue;
            }
            hash_.addFile(path, *content);
            SceneReading reading = parseScene(*content, path);
            problems_.insert(problems_.end(), reading.problems.begin(), reading.problems.end());
            if (!reading.problems.empty())
                continue;
            if (std::find(sceneNames_.begin(), sceneNames_.end(), reading.scene.name) != sceneNames_.end())
                problems_.push_back({"study.duplicate-scene",
                                     {path, 0, 0},
                                     fmt::format("Another scene is called “{}” too.", reading.scene.name),
                                     "Give each scene a name of its own.",
                                     {reading.scene.name}});
            sceneNames_.push_back(reading.scene.name);
            scenes_.push_back(std::move(reading.scene));
        }
        scenesRead_ = study_.scenesKnown && scenes_.size() == study_.scenePaths.size();
    }

    void readTrajectories() {
        names_ = folder_.motionNames(problems_);
        for (const std::string& name : names_) {
            const std::string path = motionFile(name);
            const Result<std::string> content = folder_.read(path);
            if (!content) {
                problems_.push_back(content.error());
                if (content.error().code == "study.too-large")
                    return;
                continue;
            }
            hash_.addFile(path, *content);
            TrajectoryReading reading = parseTrajectory(*content, path);
            problems_.insert(problems_.end(), reading.problems.begin(), reading.problems.end());
            if (!reading.problems.empty())
                continue;
            reading.trajectory.name = name;
            motions_.emplace(name, std::move(reading.trajectory));
        }
    }

    void readLibrary() {
        if (folder_.has(kLibraryFile)) {
            const Result<std::string> content = folder_.read(kLibraryFile);
            if (!content) {
                problems_.push_back(content.error());
                return;
            }
            hash_.addFile(kLibraryFile, *content);
            if (names_.empty() || !scenesRead_)
                return; // what the table says cannot be judged
            const std::size_t before = problems_.size();
            std::optional<Library> library =
                parseLibraryFile(*content, kLibraryFile, names_, sceneNames_, problems_);
            libraryRead_ = library.has_value();
            libraryWhole_ = problems_.size() == before;
            library_ = std::move(library).value_or(Library{});
        } else if (scenesRead_) {
            if (sceneNames_.size() > 1)
                problems_.push_back(
                    {"study.scenes-without-library",
                     study_.places.of("scenes"),
                     "There are several scenes and no library.csv that says which motion is where.",
                     "Write library.csv with the columns trajectory, scene and role.",
                     {}});
            library_ = plainLibrary(names_, sceneNames_);
            libraryRead_ = libraryWhole_ = !names_.empty();
        }
        for (const auto& [name, entry] : library_)
            if (entry.role == MotionRole::Main)
                mainMotions_.push_back(name);
        for (auto& [name, motion] : motions_)
            if (const auto found = library_.find(name); found != library_.end())
                motion.scene = found->second.scene;
    }

    bool featuresAreGiven() const {
        return std::any_of(study_.protocol.features.begin(), study_.protocol.features.end(),
                           [](const FeatureDefinition& feature) { return feature.measure.empty(); });
    }

    void readFeatures() {
        const bool other = !featuresFile_.empty();
        const std::string name = other ? featuresFile_ : kFeaturesFile;
        if (!studyFileRead_ || (!other && !folder_.has(kFeaturesFile) && !featuresAreGiven()))
            return;
        const Result<std::string> content =
            other ? files_.read(featuresFile_, FolderLimits().fileBytes) : folder_.read(kFeaturesFile);
        if (!content) {
            problems_.push_back(content.error());
            if (problems_.back().code == "study.missing-file")
                problems_.back().remedy =
                    "Write the values of the features without a measure into it, or name a "
                    "measure for each in study.toml.";
            return;
        }
        hash_.addFile(kFeaturesFile, *content);
        if (!libraryRead_)
            return;
        const std::size_t before = problems_.size();
        given_ = parseFeaturesFile(*content, name, study_.protocol.features, names_, mainMotions_, problems_);
        featuresRead_ = problems_.size() == before;
    }

    /// The values of the measured and the given features of the main library, if all are there.
    std::optional<Matrix> rawTable() {
        const std::vector<FeatureDefinition>& features = study_.protocol.features;
        if (features.empty() || (featuresAreGiven() && !featuresRead_))
            return std::nullopt;
        Matrix raw(mainMotions_.size(), features.size());
        bool whole = true;
        for (std::size_t i = 0; i < mainMotions_.size(); ++i) {
            const auto motion = motions_.find(mainMotions_[i]);
            if (motion == motions_.end()) {
                whole = false;
                continue;
            }
            std::size_t column = 0;
            for (std::size_t j = 0; j < features.size(); ++j) {
                if (features[j].measure.empty()) {
                    raw(i, j) = given_.at(mainMotions_[i])[column++].value;
                    continue;
                }
                const Measure* measure = findMeasure(features[j].measure);
                if (measure == nullptr) { // reported where study.toml was read
                    whole = false;
                    continue;
                }
                const Result<double> value = measureMotion(*measure, motion->second, features[j].settings);
                if (value)
                    raw(i, j) = *value;
                else
                    problems_.push_back(value.error());
                whole = whole && value.ok();
            }
        }
        return whole ? std::optional<Matrix>(std::move(raw)) : std::nullopt;
    }

    Result<double> measureMotion(const Measure& measure, const Trajectory& motion,
                                 const MeasureSettings& settings) {
        const auto scene = std::find_if(scenes_.begin(), scenes_.end(), [&](const Scene& candidate) {
            return candidate.name == motion.scene;
        });
        Result<double> value =
            evaluateMeasure(measure, motion, scene == scenes_.end() ? nullptr : &*scene, settings);
        if (value && std::isfinite(*value))
            return value;
        const std::string why = value ? "It is not finite." : value.error().message;
        return Error{value ? "measure.undefined" : value.error().code,
                     {motionFile(motion.name), 0, 0},
                     fmt::format("This motion has no “{}”. {}", measure.phrase, why),
                     "Take the motion out of the main library, or the feature out of the study.",
                     {measure.phrase, why}};
    }

    void makeTable() {
        std::optional<Matrix> raw = rawTable();
        if (raw && raw->rows >= 2)
            table_ = standardiseOrReport(study_, mainMotions_, std::move(*raw), given_, problems_);
    }

    Study assembled() {
        Study study;
        study.folder = path_;
        study.protocol = std::move(study_.protocol);
        study.protocol.hash = hash_.of(table_, study.protocol.features);
        study.protocol.table = std::move(table_);
        study.protocol.scenes = std::move(scenes_);
        for (const std::string& name : study.protocol.table.motions)
            study.motions.push_back(std::move(motions_.at(name)));
        for (const auto& [name, entry] : library_)
            if (entry.role != MotionRole::Main)
                study.motions.push_back(std::move(motions_.at(name)));
        return study;
    }

    /// study.toml, scenes, library.csv, features, motions; within a file by line and column.
    int rankOf(const std::string& file) const {
        if (file == kStudyFile)
            return 0;
        if (file == kLibraryFile)
            return 2;
        if (file == kFeaturesFile || file == featuresFile_)
            return 3;
        return file.starts_with("trajectories") ? 4 : 1;
    }

    std::vector<Error> inOrder() {
        std::stable_sort(problems_.begin(), problems_.end(), [this](const Error& a, const Error& b) {
            const int rankOfA = rankOf(a.place.file), rankOfB = rankOf(b.place.file);
            return std::tie(rankOfA, a.place.file, a.place.line, a.place.column) <
                   std::tie(rankOfB, b.place.file, b.place.line, b.place.column);
        });
        if (problems_.size() > kProblems) {
            const std::string more = std::to_string(problems_.size() - kProblems);
            problems_.resize(kProblems);
            problems_.push_back({"study.more-problems",
                                 {},
                                 fmt::format("There are {} more problems.", more),
                                 "Mend these first.",
                                 {more}});
        }
        for (Error& problem : problems_) {
            clip(problem.message);
            clip(problem.remedy);
            for (std::string& value : problem.values)
                clip(value);
        }
        return std::move(problems_);
    }

    const FileSystem& files_;
    StudyFolder folder_;
    std::string path_;
    std::string featuresFile_;
    std::vector<Error> problems_ = {};
    ProtocolHash hash_ = {};

    // What each step found, and whether it found it whole.
    bool studyFileRead_ = false, scenesRead_ = false, libraryRead_ = false, libraryWhole_ = false,
         featuresRead_ = false;
    StudyFile study_ = {};
    std::vector<Scene> scenes_ = {};
    std::vector<std::string> sceneNames_ = {};
    std::vector<std::string> names_ = {}; ///< of all motion files, in byte order
    std::map<std::string, Trajectory> motions_ = {};
    Library library_ = {};
    std::vector<std::string> mainMotions_ = {};
    GivenFeatures given_ = {};
    FeatureTable table_ = {};
};

} // namespace

StudyReading readStudy(const FileSystem& files, const std::string& folder, const std::string& featuresFile) {
    return StudyReader(files, folder, featuresFile).read();
}

} // namespace whichway
