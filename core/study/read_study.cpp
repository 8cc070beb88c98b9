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
#include <fmt/format.h>
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
        readStudyFile();
        readScenes();
        readTrajectories();
        readLibrary();
        readFeatures();
        if (studyFileRead_) {
            checkPairs(study_, library_, problems_);
            checkLibrarySize(study_, mainMotions_.size(), problems_);
            makeTable();
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
        const std::size_t before = problems_.size();
        study_ = parseStudyFile(*content, kStudyFile, problems_);
        studyFileRead_ = problems_.size() == before || !study_.protocol.features.empty();
    }

    void readScenes() {
        for (const std::string& path : study_.scenePaths) {
            const Result<std::string> content = folder_.read(path);
            if (!content) {
                problems_.push_back(content.error());
                continue;
            }
            hash_.addFile(path, *content);
        }
    }

    void readTrajectories() {}
    void readLibrary() {}
    void readFeatures() {}
    void makeTable() {}
    Study assembled() { return {}; }
    std::vector<Error> inOrder() { return {}; }

    const FileSystem& files_;
    StudyFolder folder_;
    std::string path_;
    std::string featuresFile_;
    std::vector<Error> problems_ = {};
    bool studyFileRead_ = false;
    StudyFile study_ = {};
    ProtocolHash hash_ = {};
    Library library_ = {};
    std::vector<std::string> mainMotions_ = {};
};

} // namespace

StudyReading readStudy(const FileSystem& files, const std::string& folder, const std::string& featuresFile) {
    return StudyReader(files, folder, featuresFile).read();
}

} // namespace whichway
