// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"

#include <cstdint>
#include <memory>
#include <string>
#include <string_view>
#include <vector>

namespace whichway {

/// A file that only grows. Not safe for use from two threads at once.
class AppendFile {
public:
    virtual ~AppendFile() = default;
    /// All of `bytes` or an error; after an error the file may hold a torn tail.
    virtual Result<void> append(std::string_view bytes) = 0;
    /// Returns after the data would survive a power cut (fdatasync).
    virtual Result<void> sync() = 0;
};

/// Held as long as the object lives; another process that asks for the same lock is refused meanwhile.
class FileLock {
public:
    virtual ~FileLock() = default;
};

enum class EntryKind { Missing, File, Directory, Link, Other };

struct DirectoryEntry {
    std::string name = {};
    EntryKind kind = EntryKind::Missing; ///< Links are not followed.
};

/// The file system as the core sees it. Paths are UTF-8 with '/'. Every method reports the world's faults as
/// errors whose place names the path: "file.missing", "file.denied", "file.disk-full", "file.exists",
/// "file.link", "file.failed". A file that is a symbolic link is never opened ("file.link"); folders may be
/// reached through links.
class FileSystem {
public:
    virtual ~FileSystem() = default;

    virtual EntryKind kind(const std::string& path) const = 0;
    /// Entries without "." and "..", sorted by name in byte order.
    virtual Result<std::vector<DirectoryEntry>> list(const std::string& directory) const = 0;
    /// Whole content. @return "file.too-large" if it is longer than `maxBytes`, "file.not-a-file" for a
    /// folder, pipe or device.
    virtual Result<std::string> read(const std::string& path, std::uint64_t maxBytes) const = 0;

    /// Creates the directory (mode 0700) and its missing parents, and syncs each one's parent. It may exist.
    virtual Result<void> createDirectory(const std::string& path) = 0;
    /// Opens for appending (mode 0600), creating the file where it is missing, and syncs its directory.
    virtual Result<std::unique_ptr<AppendFile>> openAppend(const std::string& path) = 0;
    /// Writes a temporary file beside `path`, syncs it, renames it over `path`, syncs the directory (mode
    /// 0600).
    virtual Result<void> replace(const std::string& path, std::string_view content) = 0;
    /// Cuts the file to `length` bytes and syncs it.
    virtual Result<void> truncate(const std::string& path, std::uint64_t length) = 0;
    /// Renames within one file system and syncs both directories; fails if `to` exists.
    virtual Result<void> rename(const std::string& from, const std::string& to) = 0;
    /// Removes a file, a link or an empty directory, and syncs the directory.
    virtual Result<void> remove(const std::string& path) = 0;
    /// @return "file.locked" if another process, or another lock of this one, holds it.
    virtual Result<std::unique_ptr<FileLock>> lock(const std::string& path) = 0;
};

/// The operating system's. Stateless, safe from any thread; must outlive nothing.
class RealFileSystem final : public FileSystem {
public:
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
};

} // namespace whichway
