// SPDX-License-Identifier: GPL-3.0-or-later
// The double that other tests cut the power of: it must lose what a disk may lose, and nothing else.
#include "tests/support/memory_file_system.h"

#include <gtest/gtest.h>
#include <set>

using namespace whichway;

namespace {

using Loss = MemoryFileSystem::Loss;

std::string contentOf(const MemoryFileSystem& files, const std::string& path) {
    const auto content = files.read(path, 1000);
    return content ? *content : "(" + content.error().code + ")";
}

} // namespace

TEST(MemoryFileSystem, ForgetsWhatWasNotSynced) {
    MemoryFileSystem files;
    ASSERT_TRUE(files.createDirectory("d").ok());
    auto file = files.openAppend("d/f");
    ASSERT_TRUE(file.ok());
    ASSERT_TRUE((*file)->append("safe").ok());
    ASSERT_TRUE((*file)->sync().ok());
    ASSERT_TRUE((*file)->append("lost").ok());
    EXPECT_EQ(contentOf(files, "d/f"), "safelost");
    EXPECT_EQ(contentOf(files.afterReboot(Loss::Forget, 1), "d/f"), "safe");
}

TEST(MemoryFileSystem, GarblesOnlyWhatWasNotSynced) {
    MemoryFileSystem files;
    ASSERT_TRUE(files.createDirectory("d").ok());
    auto file = files.openAppend("d/f");
    ASSERT_TRUE(file.ok());
    ASSERT_TRUE((*file)->append("safe").ok());
    ASSERT_TRUE((*file)->sync().ok());
    ASSERT_TRUE((*file)->append("lost").ok());
    std::set<std::string> kinds;
    for (std::uint64_t seed = 1; seed <= 100; ++seed) {
        const std::string content = contentOf(files.afterReboot(Loss::Garble, seed), "d/f");
        ASSERT_EQ(content.substr(0, 4), "safe");
        kinds.insert(content == "safe"                            ? "gone"
                     : content == "safelost"                      ? "kept"
                     : std::string("safelost").find(content) == 0 ? "cut short"
                                                                  : "garbage");
    }
    EXPECT_EQ(kinds, (std::set<std::string>{"gone", "kept", "cut short", "garbage"}));
}

TEST(MemoryFileSystem, StopsAtThePowerCut) {
    MemoryFileSystem files;
    ASSERT_TRUE(files.createDirectory("d").ok());
    auto file = files.openAppend("d/f");
    ASSERT_TRUE(file.ok());
    files.cutPowerAfter(2);
    EXPECT_TRUE((*file)->append("a").ok());
    EXPECT_TRUE((*file)->sync().ok());
    EXPECT_FALSE(files.powerIsOff());
    EXPECT_FALSE((*file)->append("b").ok());
    EXPECT_TRUE(files.powerIsOff());
    EXPECT_FALSE(files.replace("d/r", "r").ok());
    EXPECT_EQ(contentOf(files.afterReboot(Loss::Forget, 1), "d/f"), "a");
}

TEST(MemoryFileSystem, FailsOneStepWithHalfAWriteAndGoesOn) {
    MemoryFileSystem files;
    ASSERT_TRUE(files.createDirectory("d").ok());
    auto file = files.openAppend("d/f");
    ASSERT_TRUE(file.ok());
    files.failStep(1);
    const auto failed = (*file)->append("1234");
    ASSERT_FALSE(failed.ok());
    EXPECT_EQ(failed.error().code, "file.disk-full");
    EXPECT_EQ(contentOf(files, "d/f"), "12");
    EXPECT_TRUE((*file)->append("5").ok());
    EXPECT_EQ(contentOf(files, "d/f"), "125");
}

// A replaced file is the old or the new one, whole, wherever the power goes.
TEST(MemoryFileSystem, ReplacesAllOrNothing) {
    for (const Loss loss : {Loss::Forget, Loss::Garble}) {
        std::set<std::string> found;
        for (std::uint64_t cut = 0; cut <= 6; ++cut)
            for (std::uint64_t seed = 1; seed <= 20; ++seed) {
                MemoryFileSystem files;
                files.place("d/f", "old");
                files.cutPowerAfter(cut);
                const bool done = files.replace("d/f", "new").ok();
                const std::string content = contentOf(files.afterReboot(loss, seed), "d/f");
                EXPECT_TRUE(content == "new" || (content == "old" && !done)) << content;
                found.insert(content);
            }
        EXPECT_EQ(found, (std::set<std::string>{"new", "old"}));
    }
}

TEST(MemoryFileSystem, LosesAFileWhoseFolderWasNotSynced) {
    MemoryFileSystem files;
    ASSERT_TRUE(files.createDirectory("d").ok());
    files.cutPowerAfter(1); // the file is made, its folder not synced
    EXPECT_FALSE(files.openAppend("d/f").ok());
    EXPECT_EQ(files.kind("d/f"), EntryKind::File);
    EXPECT_EQ(files.afterReboot(Loss::Forget, 1).kind("d/f"), EntryKind::Missing);
    EXPECT_EQ(files.afterReboot(Loss::Forget, 1).kind("d"), EntryKind::Directory);
}

TEST(MemoryFileSystem, LocksDoNotSurviveThePower) {
    MemoryFileSystem files;
    const auto lock = files.lock("l");
    ASSERT_TRUE(lock.ok());
    EXPECT_FALSE(files.lock("l").ok());
    EXPECT_TRUE(files.afterReboot(Loss::Forget, 1).lock("l").ok());
}
