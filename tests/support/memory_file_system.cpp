// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/support/memory_file_system.h"

#include "core/random.h"

namespace whichway {
namespace {

std::string parentOf(const std::string& path) {
    const auto slash = path.find_last_of('/');
    return slash == std::string::npos ? "" : path.substr(0, slash);
}

Error error(const std::string& code, const std::string& path) {
    return {.code = code, .place = {.file = path}, .message = code, .remedy = ""};
}

/// What the disk may hold of a file whose last bytes were not synced.
std::string garbled(const std::string& synced, const std::string& content, Random& random) {
    if (content == synced)
        return content;
    if (content.size() < synced.size()) // a cut that was not synced: either version
        return random.uniform() < 0.5 ? content : synced;
    std::string kept = content.substr(0, synced.size() + random.below(content.size() - synced.size() + 1));
    const std::size_t garbage = random.below(3) == 0 ? random.below(40) : 0;
    for (std::size_t i = 0; i < garbage; ++i)
        kept += static_cast<char>(random.below(256));
    return kept;
}

} // namespace

class MemoryFileSystem::Appender final : public AppendFile {
public:
    Appender(MemoryFileSystem& files, std::shared_ptr<Inode> inode, std::string path)
        : files_(files), inode_(std::move(inode)), path_(std::move(path)) {}

    Result<void> append(std::string_view bytes) override {
        if (auto stepped = files_.step(path_); !stepped) {
            if (!files_.powerIsOff_)
                inode_->content += bytes.substr(0, bytes.size() / 2);
            return stepped;
        }
        inode_->content += bytes;
        return {};
    }
    Result<void> sync() override {
        if (auto stepped = files_.step(path_); !stepped)
            return stepped;
        inode_->synced = inode_->content;
        return {};
    }

private:
    MemoryFileSystem& files_;
    std::shared_ptr<Inode> inode_;
    std::string path_;
};

class MemoryFileSystem::Lock final : public FileLock {
public:
    Lock(std::shared_ptr<std::set<std::string>> locks, std::string path)
        : locks_(std::move(locks)), path_(std::move(path)) {}
    ~Lock() override { locks_->erase(path_); }

private:
    std::shared_ptr<std::set<std::string>> locks_;
    std::string path_;
};

MemoryFileSystem::MemoryFileSystem() : locks_(std::make_shared<std::set<std::string>>()) {}

Result<void> MemoryFileSystem::step(const std::string& path) {
    if (steps_ >= powerSteps_)
        powerIsOff_ = true;
    if (powerIsOff_)
        return error("file.power-off", path);
    if (++steps_ == failing_)
        return error("file.disk-full", path);
    return {};
}

void MemoryFileSystem::syncDirectory(const std::string& path) {
    std::erase_if(durable_, [&](const auto& entry) {
        return parentOf(entry.first) == path && !entries_.contains(entry.first);
    });
    for (const auto& [name, inode] : entries_)
        if (parentOf(name) == path)
            durable_[name] = inode;
}

MemoryFileSystem MemoryFileSystem::afterReboot(Loss loss, std::uint64_t seed) const {
    Random random(seed);
    MemoryFileSystem after;
    Entries kept = durable_;
    if (loss == Loss::Garble) {
        for (const auto& [name, inode] : entries_)
            if (!durable_.contains(name) || durable_.at(name) != inode)
                if (random.uniform() < 0.5)
                    kept[name] = inode;
        for (const auto& [name, inode] : durable_)
            if (!entries_.contains(name) && random.uniform() < 0.5)
                kept.erase(name);
    }
    for (const auto& [name, inode] : kept) {
        // An entry whose folder is gone is gone with it.
        if (const std::string parent = parentOf(name); !parent.empty() && !after.entries_.contains(parent))
            continue;
        if (!inode) {
            after.entries_[name] = nullptr;
            continue;
        }
        const std::string content =
            loss == Loss::Forget ? inode->synced : garbled(inode->synced, inode->content, random);
        after.entries_[name] = std::make_shared<Inode>(Inode{content, content});
    }
    after.durable_ = after.entries_;
    return after;
}

void MemoryFileSystem::place(const std::string& path, const std::string& content) {
    std::string parent = parentOf(path);
    while (!parent.empty()) {
        entries_[parent] = durable_[parent] = nullptr;
        parent = parentOf(parent);
    }
    entries_[path] = durable_[path] = std::make_shared<Inode>(Inode{content, content});
}

EntryKind MemoryFileSystem::kind(const std::string& path) const {
    const auto found = entries_.find(path);
    if (found == entries_.end())
        return EntryKind::Missing;
    return found->second ? EntryKind::File : EntryKind::Directory;
}

Result<std::vector<DirectoryEntry>> MemoryFileSystem::list(const std::string& directory) const {
    if (kind(directory) != EntryKind::Directory)
        return error("file.missing", directory);
    std::vector<DirectoryEntry> found;
    for (const auto& [name, inode] : entries_)
        if (parentOf(name) == directory)
            found.push_back({.name = name.substr(directory.size() + 1),
                             .kind = inode ? EntryKind::File : EntryKind::Directory});
    return found;
}

Result<std::string> MemoryFileSystem::read(const std::string& path, std::uint64_t maxBytes) const {
    if (kind(path) != EntryKind::File)
        return error("file.missing", path);
    const std::string& content = entries_.at(path)->content;
    if (content.size() > maxBytes)
        return error("file.too-large", path);
    return content;
}

Result<void> MemoryFileSystem::createDirectory(const std::string& path) {
    if (path.empty() || kind(path) == EntryKind::Directory)
        return {};
    if (auto made = createDirectory(parentOf(path)); !made)
        return made;
    if (auto stepped = step(path); !stepped)
        return stepped;
    entries_[path] = nullptr;
    if (auto stepped = step(path); !stepped)
        return stepped;
    syncDirectory(parentOf(path));
    return {};
}

Result<std::unique_ptr<AppendFile>> MemoryFileSystem::openAppend(const std::string& path) {
    if (kind(path) == EntryKind::Missing) {
        if (kind(parentOf(path)) != EntryKind::Directory)
            return error("file.missing", path);
        if (auto stepped = step(path); !stepped)
            return stepped.error();
        entries_[path] = std::make_shared<Inode>();
    }
    if (kind(path) != EntryKind::File)
        return error("file.failed", path);
    if (auto stepped = step(path); !stepped)
        return stepped.error();
    syncDirectory(parentOf(path));
    return std::unique_ptr<AppendFile>(std::make_unique<Appender>(*this, entries_.at(path), path));
}

Result<void> MemoryFileSystem::replace(const std::string& path, std::string_view content) {
    const std::string temporary = path + ".new";
    if (auto stepped = step(path); !stepped)
        return stepped;
    auto inode = std::make_shared<Inode>();
    entries_[temporary] = inode;
    if (auto stepped = step(path); !stepped) {
        inode->content = content.substr(0, content.size() / 2);
        return stepped;
    }
    inode->content = content;
    if (auto stepped = step(path); !stepped)
        return stepped;
    inode->synced = inode->content;
    if (auto stepped = step(path); !stepped)
        return stepped;
    entries_.erase(temporary);
    entries_[path] = inode;
    if (auto stepped = step(path); !stepped)
        return stepped;
    syncDirectory(parentOf(path));
    return {};
}

Result<void> MemoryFileSystem::truncate(const std::string& path, std::uint64_t length) {
    if (kind(path) != EntryKind::File)
        return error("file.missing", path);
    if (auto stepped = step(path); !stepped)
        return stepped;
    Inode& inode = *entries_.at(path);
    inode.content.resize(length);
    if (auto stepped = step(path); !stepped)
        return stepped;
    inode.synced = inode.content;
    return {};
}

Result<void> MemoryFileSystem::rename(const std::string& from, const std::string& to) {
    if (kind(from) == EntryKind::Missing)
        return error("file.missing", to);
    if (kind(to) != EntryKind::Missing)
        return error("file.exists", to);
    if (auto stepped = step(to); !stepped)
        return stepped;
    Entries moved;
    for (auto entry = entries_.begin(); entry != entries_.end();) {
        if (entry->first == from || entry->first.starts_with(from + "/")) {
            moved[to + entry->first.substr(from.size())] = entry->second;
            entry = entries_.erase(entry);
        } else {
            ++entry;
        }
    }
    entries_.merge(moved);
    if (auto stepped = step(to); !stepped)
        return stepped;
    syncDirectory(parentOf(to));
    syncDirectory(parentOf(from));
    return {};
}

Result<void> MemoryFileSystem::remove(const std::string& path) {
    if (kind(path) == EntryKind::Missing)
        return error("file.missing", path);
    if (const auto below = entries_.lower_bound(path + "/");
        below != entries_.end() && below->first.starts_with(path + "/"))
        return error("file.failed", path);
    if (auto stepped = step(path); !stepped)
        return stepped;
    entries_.erase(path);
    if (auto stepped = step(path); !stepped)
        return stepped;
    syncDirectory(parentOf(path));
    return {};
}

Result<std::unique_ptr<FileLock>> MemoryFileSystem::lock(const std::string& path) {
    if (!locks_->insert(path).second)
        return error("file.locked", path);
    return std::unique_ptr<FileLock>(std::make_unique<Lock>(locks_, path));
}

} // namespace whichway
