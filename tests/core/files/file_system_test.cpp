// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/file_system.h"

#include "tests/support/memory_file_system.h"

#include <csignal>
#include <filesystem>
#include <fstream>
#include <gmock/gmock.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>

using namespace whichway;

namespace {

/// A folder that goes with its test.
class TemporaryFolder {
public:
    TemporaryFolder() {
        std::string name = (std::filesystem::temp_directory_path() / "whichway-files-XXXXXX").string();
        path_ = ::mkdtemp(name.data());
    }
    ~TemporaryFolder() { std::filesystem::remove_all(path_); }
    TemporaryFolder(const TemporaryFolder&) = delete;
    TemporaryFolder& operator=(const TemporaryFolder&) = delete;
    const std::string& path() const { return path_; }

private:
    std::string path_;
};

template <typename T>
std::string codeOf(const Result<T>& result) {
    return result ? "" : result.error().code;
}

mode_t modeOf(const std::string& path) {
    struct stat status {};
    EXPECT_EQ(::lstat(path.c_str(), &status), 0);
    return status.st_mode & 07777;
}

/// What both file systems promise: tests on the one in memory are worth what it shares with the real one.
class AnyFileSystem : public ::testing::TestWithParam<bool> {
protected:
    FileSystem& files() { return GetParam() ? static_cast<FileSystem&>(real_) : memory_; }
    std::string at(const std::string& name) const {
        return (GetParam() ? folder_.path() : "root") + "/" + name;
    }
    void SetUp() override { memory_.place("root/there", "t"); }
    std::string contentOf(const std::string& name) {
        const auto content = files().read(at(name), 1000);
        return content ? *content : "(" + content.error().code + ")";
    }

private:
    TemporaryFolder folder_;
    RealFileSystem real_;
    MemoryFileSystem memory_;
};

} // namespace

TEST_P(AnyFileSystem, AppendsAndReads) {
    {
        auto file = files().openAppend(at("a"));
        ASSERT_TRUE(file.ok());
        EXPECT_TRUE((*file)->append("one\n").ok());
        EXPECT_TRUE((*file)->append(std::string("\0two", 4)).ok());
        EXPECT_TRUE((*file)->sync().ok());
    }
    auto again = files().openAppend(at("a"));
    ASSERT_TRUE(again.ok());
    EXPECT_TRUE((*again)->append("!").ok());
    EXPECT_EQ(contentOf("a"), std::string("one\n\0two!", 9));
    EXPECT_EQ(files().kind(at("a")), EntryKind::File);
}

TEST_P(AnyFileSystem, CutsAFileWhileItIsOpenForAppending) {
    auto file = files().openAppend(at("a"));
    ASSERT_TRUE(file.ok());
    EXPECT_TRUE((*file)->append("one two").ok());
    EXPECT_TRUE(files().truncate(at("a"), 3).ok());
    EXPECT_TRUE((*file)->append("!").ok());
    EXPECT_EQ(contentOf("a"), "one!");
}

TEST_P(AnyFileSystem, ReplacesWholeFilesAndLeavesNothingBeside) {
    EXPECT_TRUE(files().createDirectory(at("d")).ok());
    EXPECT_TRUE(files().replace(at("d/r"), "first").ok());
    EXPECT_TRUE(files().replace(at("d/r"), "second").ok());
    EXPECT_EQ(contentOf("d/r"), "second");
    const auto entries = files().list(at("d"));
    ASSERT_TRUE(entries.ok());
    ASSERT_EQ(entries->size(), 1u);
    EXPECT_EQ(entries->front().name, "r");
}

TEST_P(AnyFileSystem, ListsInByteOrder) {
    for (const char* name : {"d/b", "d/a", "d/B", "d/é", "d/a0"})
        EXPECT_TRUE(files().createDirectory(at(name)).ok());
    EXPECT_TRUE(files().replace(at("d/a/inside"), "").ok());
    EXPECT_TRUE(files().replace(at("d/c"), "").ok());
    const auto entries = files().list(at("d"));
    ASSERT_TRUE(entries.ok());
    std::vector<std::string> names;
    for (const DirectoryEntry& entry : *entries) {
        names.push_back(entry.name);
        EXPECT_EQ(entry.kind, entry.name == "c" ? EntryKind::File : EntryKind::Directory);
    }
    EXPECT_THAT(names, testing::ElementsAre("B", "a", "a0", "b", "c", "é"));
    EXPECT_EQ(codeOf(files().list(at("nowhere"))), "file.missing");
}

TEST_P(AnyFileSystem, MakesFoldersWithTheirParentsAndDoesNotMindIfTheyAreThere) {
    EXPECT_TRUE(files().createDirectory(at("x/y/z")).ok());
    EXPECT_TRUE(files().createDirectory(at("x/y/z")).ok());
    EXPECT_EQ(files().kind(at("x/y/z")), EntryKind::Directory);
    EXPECT_EQ(files().kind(at("x/y/w")), EntryKind::Missing);
}

TEST_P(AnyFileSystem, RenamesFilesAndFoldersButNotOntoSomething) {
    EXPECT_TRUE(files().createDirectory(at("from")).ok());
    EXPECT_TRUE(files().replace(at("from/f"), "f").ok());
    EXPECT_TRUE(files().rename(at("from"), at("to")).ok());
    EXPECT_EQ(contentOf("to/f"), "f");
    EXPECT_EQ(files().kind(at("from")), EntryKind::Missing);
    EXPECT_TRUE(files().replace(at("g"), "g").ok());
    EXPECT_EQ(codeOf(files().rename(at("g"), at("to/f"))), "file.exists");
    EXPECT_EQ(contentOf("g"), "g");
    EXPECT_EQ(contentOf("to/f"), "f");
    EXPECT_EQ(codeOf(files().rename(at("nothing"), at("else"))), "file.missing");
}

TEST_P(AnyFileSystem, RemovesFilesAndEmptyFoldersOnly) {
    EXPECT_TRUE(files().createDirectory(at("d")).ok());
    EXPECT_TRUE(files().replace(at("d/f"), "f").ok());
    EXPECT_FALSE(files().remove(at("d")).ok());
    EXPECT_EQ(contentOf("d/f"), "f");
    EXPECT_TRUE(files().remove(at("d/f")).ok());
    EXPECT_TRUE(files().remove(at("d")).ok());
    EXPECT_EQ(files().kind(at("d")), EntryKind::Missing);
    EXPECT_EQ(codeOf(files().remove(at("d"))), "file.missing");
}

TEST_P(AnyFileSystem, ReadsNoMoreThanIsAllowed) {
    EXPECT_TRUE(files().replace(at("f"), std::string(100, 'x')).ok());
    EXPECT_TRUE(files().read(at("f"), 100).ok());
    const auto refused = files().read(at("f"), 99);
    EXPECT_EQ(codeOf(refused), "file.too-large");
    EXPECT_EQ(refused.error().place.file, at("f"));
    EXPECT_EQ(codeOf(files().read(at("none"), 99)), "file.missing");
}

TEST_P(AnyFileSystem, LocksOnceAtATimeEvenWithinOneProgram) {
    auto lock = files().lock(at("lock"));
    ASSERT_TRUE(lock.ok());
    EXPECT_EQ(codeOf(files().lock(at("lock"))), "file.locked");
    EXPECT_TRUE(files().lock(at("other")).ok());
    lock->reset();
    EXPECT_TRUE(files().lock(at("lock")).ok());
}

INSTANTIATE_TEST_SUITE_P(Both, AnyFileSystem, ::testing::Bool(),
                         [](const auto& tested) { return tested.param ? "Real" : "InMemory"; });

TEST(RealFileSystem, KeepsFilesAndFoldersToTheirOwner) {
    const TemporaryFolder folder;
    const mode_t before = ::umask(0);
    RealFileSystem files;
    EXPECT_TRUE(files.createDirectory(folder.path() + "/a/b").ok());
    EXPECT_TRUE(files.openAppend(folder.path() + "/a/f").ok());
    EXPECT_TRUE(files.replace(folder.path() + "/a/r", "r").ok());
    EXPECT_TRUE(files.lock(folder.path() + "/a/l").ok());
    ::umask(before);
    EXPECT_EQ(modeOf(folder.path() + "/a"), 0700u);
    EXPECT_EQ(modeOf(folder.path() + "/a/b"), 0700u);
    for (const char* name : {"f", "r", "l"})
        EXPECT_EQ(modeOf(folder.path() + "/a/" + name), 0600u) << name;
}

TEST(RealFileSystem, OpensNoFileThroughALink) {
    const TemporaryFolder folder;
    const std::string link = folder.path() + "/link", target = folder.path() + "/target";
    std::ofstream(target) << "secret";
    std::filesystem::create_symlink(target, link);
    RealFileSystem files;
    EXPECT_EQ(files.kind(link), EntryKind::Link);
    EXPECT_EQ(codeOf(files.read(link, 100)), "file.link");
    EXPECT_EQ(codeOf(files.openAppend(link)), "file.link");
    EXPECT_EQ(codeOf(files.truncate(link, 0)), "file.link");
    EXPECT_EQ(codeOf(files.lock(link)), "file.link");
    // Replacing and removing act on the link, not on what it points to.
    EXPECT_TRUE(files.replace(link, "new").ok());
    EXPECT_EQ(files.kind(link), EntryKind::File);
    EXPECT_EQ(*files.read(target, 100), "secret");
}

TEST(RealFileSystem, ReachesFoldersThroughLinks) {
    const TemporaryFolder folder;
    std::filesystem::create_directory(folder.path() + "/real");
    std::filesystem::create_symlink(folder.path() + "/real", folder.path() + "/link");
    RealFileSystem files;
    EXPECT_TRUE(files.createDirectory(folder.path() + "/link").ok());
    EXPECT_TRUE(files.createDirectory(folder.path() + "/link/in").ok());
    EXPECT_TRUE(files.replace(folder.path() + "/link/in/f", "f").ok());
    EXPECT_EQ(*files.read(folder.path() + "/real/in/f", 10), "f");
}

TEST(RealFileSystem, RefusesWhatIsNoOrdinaryFileWithoutWaiting) {
    const TemporaryFolder folder;
    RealFileSystem files;
    const std::string pipe = folder.path() + "/pipe";
    ASSERT_EQ(::mkfifo(pipe.c_str(), 0600), 0);
    EXPECT_EQ(codeOf(files.read(pipe, 10)), "file.not-a-file");
    EXPECT_EQ(codeOf(files.read(folder.path(), 10)), "file.not-a-file");
    EXPECT_EQ(files.kind(pipe), EntryKind::Other);
}

TEST(RealFileSystem, NamesWhatIsMissingOrInTheWay) {
    const TemporaryFolder folder;
    RealFileSystem files;
    EXPECT_TRUE(files.replace(folder.path() + "/f", "f").ok());
    EXPECT_EQ(codeOf(files.openAppend(folder.path() + "/no/f")), "file.missing");
    EXPECT_EQ(codeOf(files.replace(folder.path() + "/no/f", "")), "file.missing");
    EXPECT_FALSE(files.createDirectory(folder.path() + "/f").ok());
    EXPECT_FALSE(files.createDirectory(folder.path() + "/f/g").ok());
    // The file cannot take a folder's place; nothing is left beside it.
    EXPECT_TRUE(files.createDirectory(folder.path() + "/d/e").ok());
    EXPECT_FALSE(files.replace(folder.path() + "/d", "").ok());
    EXPECT_EQ(files.kind(folder.path() + "/d.new"), EntryKind::Missing);
    EXPECT_EQ(files.kind(folder.path() + "/d/e"), EntryKind::Directory);
}

// Source: full(4), the device that is always full.
TEST(RealFileSystem, SaysThatTheDiskIsFull) {
    RealFileSystem files;
    auto full = files.openAppend("/dev/full");
    ASSERT_TRUE(full.ok()) << describe(full.error());
    const auto written = (*full)->append("x");
    EXPECT_EQ(codeOf(written), "file.disk-full");
    EXPECT_EQ(written.error().place.file, "/dev/full");
}

TEST(RealFileSystem, WritesOverWhatACrashLeftBesideAFile) {
    const TemporaryFolder folder;
    RealFileSystem files;
    std::ofstream(folder.path() + "/f.new") << "half of a longer con";
    EXPECT_TRUE(files.replace(folder.path() + "/f", "whole").ok());
    EXPECT_EQ(*files.read(folder.path() + "/f", 100), "whole");
    EXPECT_EQ(files.kind(folder.path() + "/f.new"), EntryKind::Missing);
}

// A lock must not outlive the process that holds it, however that one ends.
TEST(RealFileSystem, FreesTheLockOfAKilledProgram) {
    const TemporaryFolder folder;
    const std::string path = folder.path() + "/lock";
    int locked[2] = {-1, -1};
    ASSERT_EQ(::pipe(locked), 0);
    const pid_t child = ::fork();
    ASSERT_GE(child, 0);
    if (child == 0) {
        RealFileSystem files;
        const auto lock = files.lock(path);
        const char told = lock.ok() ? 'y' : 'n';
        if (::write(locked[1], &told, 1) != 1)
            ::_exit(1);
        for (;;)
            ::pause();
    }
    char told = 0;
    ASSERT_EQ(::read(locked[0], &told, 1), 1);
    EXPECT_EQ(told, 'y');
    RealFileSystem files;
    EXPECT_EQ(codeOf(files.lock(path)), "file.locked");
    ASSERT_EQ(::kill(child, SIGKILL), 0);
    ASSERT_EQ(::waitpid(child, nullptr, 0), child);
    EXPECT_TRUE(files.lock(path).ok());
    ::close(locked[0]);
    ::close(locked[1]);
}
