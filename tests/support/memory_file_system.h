// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"

#include <cstdint>
#include <map>
#include <memory>
#include <set>
#include <string>

namespace whichway {

/// A file system in memory that loses, as real ones may, whatever was not synced when the power goes.
///
/// Every primitive step (create, write, sync, rename, sync of a folder, …) is counted. `cutPowerAfter(n)`
/// lets n steps pass and fails everything after them; `afterReboot` gives what the disk holds then.
/// `failStep(n)` lets step n alone fail with a full disk, a write leaving half of its bytes behind.
class MemoryFileSystem final : public FileSystem {
public:
    /// What becomes of data and folder entries that were not synced.
    enum class Loss {
        Forget, ///< all of it is gone
        Garble  ///< each piece is kept, gone, or cut short and followed by garbage, by the seed
    };

    MemoryFileSystem();

    void cutPowerAfter(std::uint64_t steps) { powerSteps_ = steps_ + steps; }
    void failStep(std::uint64_t step) { failing_ = steps_ + step; }
    std::uint64_t steps() const { return steps_; }
    bool powerIsOff() const { return powerIsOff_; }
    MemoryFileSystem afterReboot(Loss loss, std::uint64_t seed) const;

    /// Puts a file in place, synced, without counting steps.
    void place(const std::string& path, const std::string& content);

    EntryKind kind(const std::string& path) const override;
    Result<std::vector<DirectoryEntry>> list(const std::string& directory) const override;
    Result<std::string> read(const std::string& path, std::uint64_t maxBytes) const override;
    Result<void> createDirectory(const std::string& path) override;
    Result<std::unique_ptr<AppendFile>> openAppend(const std::string& path) override;
    Result<void> replace(const std::string& path, std::string_view content) override;
    Result<void> truncate(const std::string& path, std::uint64_t length) override;
    Result<void> rename(const std::string& from, const std::string& to) override;
    Result<void> remove(const std::string& path) override;
    Result<std::unique_ptr<FileLock>> lock(const std::string& path) override;

private:
    struct Inode {
        std::string content;
        std::string synced;
    };
    using Entries = std::map<std::string, std::shared_ptr<Inode>>; ///< folders have no inode
    class Appender;
    class Lock;

    /// Counts a step. @return an error if the power is off or this step is to fail.
    Result<void> step(const std::string& path);
    void syncDirectory(const std::string& path);

    Entries entries_;
    Entries durable_;
    std::shared_ptr<std::set<std::string>> locks_;
    std::uint64_t steps_ = 0;
    std::uint64_t powerSteps_ = UINT64_MAX;
    std::uint64_t failing_ = UINT64_MAX;
    bool powerIsOff_ = false;
};

} // namespace whichway
