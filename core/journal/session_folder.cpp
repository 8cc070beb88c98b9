// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/journal/session_folder.h"

#include <algorithm>
#include <cerrno>
#include <stdexcept>
#include <sys/random.h>
#include <system_error>

namespace whichway {
namespace {

constexpr std::size_t kIdLength = 32;

bool isId(const std::string& name) {
    return name.size() == kIdLength && std::all_of(name.begin(), name.end(), [](char c) {
               return (c >= '0' && c <= '9') || (c >= 'a' && c <= 'f');
           });
}

std::string codeIn(const FileSystem& files, const std::string& folder) {
    auto code = files.read(folder + "/participant.txt", 256);
    if (!code)
        return "";
    while (!code->empty() && (code->back() == '\n' || code->back() == '\r'))
        code->pop_back();
    return checkParticipantCode(*code).ok() ? *code : "";
}

} // namespace

Result<void> checkParticipantCode(const std::string& code) {
    const bool good = !code.empty() && code.size() <= 64 && std::all_of(code.begin(), code.end(), [](char c) {
        return (c >= '0' && c <= '9') || (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || c == '_' ||
               c == '-';
    });
    if (good)
        return {};
    return Error{.code = "session.code",
                 .place = {},
                 .message = "A participant code is 1 to 64 letters, digits, “-” or “_”.",
                 .remedy = "Give another code; never a name."};
}

Result<SessionFolder> createSessionFolder(FileSystem& files, const std::string& study, SessionKind kind,
                                          const std::string& id, const std::string& code) {
    if (auto checked = checkParticipantCode(code); !checked)
        return checked.error();
    if (!isId(id))
        throw std::invalid_argument("createSessionFolder: the id is not 32 lower-case hexadecimal digits");
    const bool pilot = kind != SessionKind::Participant;
    SessionFolder folder{
        .path = study + (pilot ? "/pilots/" : "/sessions/") + id, .id = id, .code = code, .pilot = pilot};
    if (files.kind(folder.path) != EntryKind::Missing)
        return Error{.code = "file.exists",
                     .place = {.file = folder.path},
                     .message = "There is a session of that id already.",
                     .remedy = "Begin again with another id."};
    if (auto made = files.createDirectory(folder.path); !made)
        return made.error();
    if (auto written = files.replace(folder.path + "/participant.txt", code + "\n"); !written)
        return written.error();
    return folder;
}

Result<std::vector<SessionFolder>> listSessionFolders(const FileSystem& files, const std::string& study) {
    std::vector<SessionFolder> folders;
    for (const bool pilot : {false, true}) {
        const std::string parent = study + (pilot ? "/pilots" : "/sessions");
        if (files.kind(parent) != EntryKind::Directory)
            continue;
        const auto entries = files.list(parent);
        if (!entries)
            return entries.error();
        for (const DirectoryEntry& entry : *entries)
            if (entry.kind == EntryKind::Directory && isId(entry.name)) {
                const std::string path = parent + "/" + entry.name;
                folders.push_back(
                    {.path = path, .id = entry.name, .code = codeIn(files, path), .pilot = pilot});
            }
    }
    std::sort(folders.begin(), folders.end(),
              [](const SessionFolder& a, const SessionFolder& b) { return a.id < b.id; });
    return folders;
}

Result<SessionFolder> openSessionFolder(const FileSystem& files, const std::string& path) {
    std::string trimmed = path;
    while (trimmed.size() > 1 && trimmed.back() == '/')
        trimmed.pop_back();
    SessionFolder folder{.path = trimmed};
    if (files.kind(folder.journal()) != EntryKind::File)
        return Error{.code = "session.not-a-session",
                     .place = {.file = trimmed},
                     .message = "There is no session here.",
                     .remedy = "Name a folder inside sessions/ or pilots/ of a study."};
    const std::size_t slash = trimmed.find_last_of('/');
    folder.id = slash == std::string::npos ? trimmed : trimmed.substr(slash + 1);
    const std::string parent = slash == std::string::npos ? "" : trimmed.substr(0, slash);
    folder.pilot = parent == "pilots" || parent.ends_with("/pilots");
    folder.code = codeIn(files, trimmed);
    return folder;
}

std::string randomSessionId() {
    unsigned char bytes[kIdLength / 2];
    std::size_t filled = 0;
    while (filled < sizeof bytes) {
        const ssize_t count = ::getrandom(bytes + filled, sizeof bytes - filled, 0);
        if (count < 0 && errno != EINTR)
            throw std::system_error(errno, std::generic_category(), "getrandom");
        if (count > 0)
            filled += static_cast<std::size_t>(count);
    }
    std::string id;
    for (const unsigned char byte : bytes) {
        id += "0123456789abcdef"[byte >> 4];
        id += "0123456789abcdef"[byte & 15];
    }
    return id;
}

} // namespace whichway
