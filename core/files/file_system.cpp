// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/file_system.h"

#include <algorithm>
#include <cerrno>
#include <cstring>
#include <dirent.h>
#include <fcntl.h>
#include <sys/file.h>
#include <sys/stat.h>
#include <unistd.h>
#include <utility>

namespace whichway {
namespace {

Error failure(const std::string& what, const std::string& path, int number) {
    Error error{.code = "file.failed",
                .place = {.file = path},
                .message = what + " failed: " + std::strerror(number) + ".",
                .remedy = "",
                .values = {what, std::strerror(number)}};
    switch (number) {
    case ENOENT:
    case ENOTDIR:
        error.code = "file.missing";
        error.message = "There is no such file or folder.";
        break;
    case EACCES:
    case EPERM:
    case EROFS:
        error.code = "file.denied";
        error.message = what + " is not permitted.";
        error.remedy = "Check who owns the folder and whether it is read-only.";
        break;
    case ENOSPC:
    case EDQUOT:
        error.code = "file.disk-full";
        error.message = "The disk is full.";
        error.remedy = "Free some space, then try again.";
        break;
    case ELOOP:
        error.code = "file.link";
        error.message = "This is a symbolic link, which is not followed.";
        error.remedy = "Put the file itself in its place.";
        break;
    case EEXIST:
        error.code = "file.exists";
        error.message = "There is something of that name already.";
        break;
    default:
        break;
    }
    return error;
}

/// A file descriptor that closes itself.
class Descriptor {
public:
    explicit Descriptor(int number = -1) : number_(number) {}
    ~Descriptor() { reset(); }
    Descriptor(Descriptor&& other) noexcept : number_(std::exchange(other.number_, -1)) {}
    Descriptor& operator=(Descriptor&& other) noexcept {
        if (this != &other) {
            reset();
            number_ = std::exchange(other.number_, -1);
        }
        return *this;
    }
    Descriptor(const Descriptor&) = delete;
    Descriptor& operator=(const Descriptor&) = delete;

    int number() const { return number_; }
    bool open() const { return number_ >= 0; }

private:
    void reset() {
        if (number_ >= 0)
            ::close(number_);
        number_ = -1;
    }
    int number_;
};

/// Calls again what a signal interrupted.
template <typename Call>
auto retried(Call call) {
    auto result = call();
    while (result < 0 && errno == EINTR)
        result = call();
    return result;
}

Descriptor openFile(const std::string& path, int flags, mode_t mode = 0) {
    return Descriptor(retried([&] { return ::open(path.c_str(), flags | O_CLOEXEC | O_NOFOLLOW, mode); }));
}

std::string parentOf(const std::string& path) {
    const auto slash = path.find_last_of('/');
    if (slash == std::string::npos)
        return ".";
    return slash == 0 ? "/" : path.substr(0, slash);
}

Result<void> syncDirectory(const std::string& path) {
    // The folder itself may be reached through links (a home folder often is), so only files refuse them.
    Descriptor directory(retried([&] { return ::open(path.c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC); }));
    if (!directory.open())
        return failure("Syncing the folder", path, errno);
    // Some network file systems cannot sync a folder and say so with EINVAL; they keep its entries elsewhere.
    if (retried([&] { return ::fsync(directory.number()); }) != 0 && errno != EINVAL)
        return failure("Syncing the folder", path, errno);
    return {};
}

bool isDirectory(const std::string& path) {
    struct stat status {};
    return ::stat(path.c_str(), &status) == 0 && S_ISDIR(status.st_mode);
}

Result<void> writeAll(int number, std::string_view bytes, const std::string& path) {
    while (!bytes.empty()) {
        const ssize_t written = ::write(number, bytes.data(), bytes.size());
        if (written < 0) {
            if (errno == EINTR)
                continue;
            return failure("Writing", path, errno);
        }
        bytes.remove_prefix(static_cast<std::size_t>(written));
    }
    return {};
}

class RealAppendFile final : public AppendFile {
public:
    RealAppendFile(Descriptor file, std::string path) : file_(std::move(file)), path_(std::move(path)) {}
    Result<void> append(std::string_view bytes) override { return writeAll(file_.number(), bytes, path_); }
    Result<void> sync() override {
        if (retried([&] { return ::fdatasync(file_.number()); }) != 0)
            return failure("Syncing", path_, errno);
        return {};
    }

private:
    Descriptor file_;
    std::string path_;
};

class RealFileLock final : public FileLock {
public:
    explicit RealFileLock(Descriptor file) : file_(std::move(file)) {}

private:
    Descriptor file_;
};

EntryKind kindOf(const struct stat& status) {
    if (S_ISREG(status.st_mode))
        return EntryKind::File;
    if (S_ISDIR(status.st_mode))
        return EntryKind::Directory;
    if (S_ISLNK(status.st_mode))
        return EntryKind::Link;
    return EntryKind::Other;
}

} // namespace

EntryKind RealFileSystem::kind(const std::string& path) const {
    struct stat status {};
    return ::lstat(path.c_str(), &status) == 0 ? kindOf(status) : EntryKind::Missing;
}

Result<std::vector<DirectoryEntry>> RealFileSystem::list(const std::string& directory) const {
    DIR* const stream = ::opendir(directory.c_str());
    if (!stream)
        return failure("Listing", directory, errno);
    std::vector<DirectoryEntry> entries;
    errno = 0; // readdir ends with null both ways
    while (const dirent* entry = ::readdir(stream)) {
        const std::string name = entry->d_name;
        if (name != "." && name != "..")
            entries.push_back({.name = name, .kind = kind(directory + "/" + name)});
        errno = 0;
    }
    const int number = errno;
    ::closedir(stream);
    if (number != 0)
        return failure("Listing", directory, number);
    std::sort(entries.begin(), entries.end(),
              [](const DirectoryEntry& a, const DirectoryEntry& b) { return a.name < b.name; });
    return entries;
}

Result<std::string> RealFileSystem::read(const std::string& path, std::uint64_t maxBytes) const {
    // Without O_NONBLOCK a named pipe in a study folder would keep the program waiting for ever.
    Descriptor file = openFile(path, O_RDONLY | O_NONBLOCK);
    if (!file.open())
        return failure("Reading", path, errno);
    struct stat status {};
    if (::fstat(file.number(), &status) != 0)
        return failure("Reading", path, errno);
    if (!S_ISREG(status.st_mode))
        return Error{.code = "file.not-a-file",
                     .place = {.file = path},
                     .message = "This is no ordinary file.",
                     .remedy = "Put a file in its place."};
    std::string content;
    char buffer[1 << 16];
    for (;;) {
        const ssize_t count = ::read(file.number(), buffer, sizeof buffer);
        if (count < 0 && errno == EINTR)
            continue;
        if (count < 0)
            return failure("Reading", path, errno);
        if (count == 0)
            return content;
        content.append(buffer, static_cast<std::size_t>(count));
        if (content.size() > maxBytes)
            return Error{.code = "file.too-large",
                         .place = {.file = path},
                         .message = "The file is longer than " + std::to_string(maxBytes) + " bytes.",
                         .remedy = "Shorten or split it.",
                         .values = {std::to_string(maxBytes)}};
    }
}

Result<void> RealFileSystem::createDirectory(const std::string& path) {
    if (path.empty() || isDirectory(path))
        return {};
    const std::string parent = parentOf(path);
    if (auto made = createDirectory(parent); !made)
        return made;
    if (::mkdir(path.c_str(), 0700) != 0 && !(errno == EEXIST && isDirectory(path)))
        return failure("Making the folder", path, errno);
    return syncDirectory(parent);
}

Result<std::unique_ptr<AppendFile>> RealFileSystem::openAppend(const std::string& path) {
    Descriptor file = openFile(path, O_WRONLY | O_APPEND | O_CREAT, 0600);
    if (!file.open())
        return failure("Opening", path, errno);
    // Also when the file was there: the run that made it may have been killed before it synced the folder.
    if (auto synced = syncDirectory(parentOf(path)); !synced)
        return synced.error();
    return std::unique_ptr<AppendFile>(std::make_unique<RealAppendFile>(std::move(file), path));
}

Result<void> RealFileSystem::replace(const std::string& path, std::string_view content) {
    const std::string temporary = path + ".new";
    {
        Descriptor file = openFile(temporary, O_WRONLY | O_CREAT | O_TRUNC, 0600);
        if (!file.open())
            return failure("Writing", temporary, errno);
        if (auto written = writeAll(file.number(), content, temporary); !written) {
            ::unlink(temporary.c_str());
            return written;
        }
        if (retried([&] { return ::fsync(file.number()); }) != 0) {
            const int number = errno;
            ::unlink(temporary.c_str());
            return failure("Syncing", temporary, number);
        }
    }
    if (::rename(temporary.c_str(), path.c_str()) != 0) {
        const int number = errno;
        ::unlink(temporary.c_str());
        return failure("Renaming", path, number);
    }
    return syncDirectory(parentOf(path));
}

Result<void> RealFileSystem::truncate(const std::string& path, std::uint64_t length) {
    Descriptor file = openFile(path, O_WRONLY);
    if (!file.open() ||
        retried([&] { return ::ftruncate(file.number(), static_cast<off_t>(length)); }) != 0 ||
        retried([&] { return ::fdatasync(file.number()); }) != 0)
        return failure("Cutting the file", path, errno);
    return {};
}

Result<void> RealFileSystem::rename(const std::string& from, const std::string& to) {
    int done = ::renameat2(AT_FDCWD, from.c_str(), AT_FDCWD, to.c_str(), RENAME_NOREPLACE);
    if (done != 0 && errno == EINVAL && kind(to) == EntryKind::Missing) // NFS does not know the flag
        done = ::rename(from.c_str(), to.c_str());
    if (done != 0)
        return failure("Renaming", to, errno);
    if (auto synced = syncDirectory(parentOf(to)); !synced)
        return synced;
    return parentOf(from) == parentOf(to) ? Result<void>() : syncDirectory(parentOf(from));
}

Result<void> RealFileSystem::remove(const std::string& path) {
    const int done = kind(path) == EntryKind::Directory ? ::rmdir(path.c_str()) : ::unlink(path.c_str());
    if (done != 0)
        return failure("Removing", path, errno);
    return syncDirectory(parentOf(path));
}

Result<std::unique_ptr<FileLock>> RealFileSystem::lock(const std::string& path) {
    Descriptor file = openFile(path, O_RDWR | O_CREAT, 0600);
    if (!file.open())
        return failure("Locking", path, errno);
    // flock belongs to the open file, not to the process, so a second lock of this process is refused as
    // well.
    if (::flock(file.number(), LOCK_EX | LOCK_NB) != 0) {
        if (errno != EWOULDBLOCK)
            return failure("Locking", path, errno);
        return Error{.code = "file.locked",
                     .place = {.file = path},
                     .message = "Another program has this open.",
                     .remedy = "Close it there first."};
    }
    return std::unique_ptr<FileLock>(std::make_unique<RealFileLock>(std::move(file)));
}

} // namespace whichway
