// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/journal/session_folder.h"

#include "tests/support/memory_file_system.h"

#include <gtest/gtest.h>
#include <set>
#include <stdexcept>

using namespace whichway;

namespace {

const std::string kFirst = "00112233445566778899aabbccddeeff", kSecond = "ffeeddccbbaa99887766554433221100";

} // namespace

TEST(SessionFolder, KeepsTheCodeInOneFileAndPilotsApart) {
    MemoryFileSystem files;
    const auto session = createSessionFolder(files, "study", SessionKind::Participant, kFirst, "K7");
    const auto pilot = createSessionFolder(files, "study", SessionKind::Pilot, kSecond, "me_2");
    ASSERT_TRUE(session.ok() && pilot.ok());
    EXPECT_EQ(session->path, "study/sessions/" + kFirst);
    EXPECT_EQ(pilot->path, "study/pilots/" + kSecond);
    EXPECT_TRUE(pilot->pilot);
    EXPECT_EQ(*files.read(session->path + "/participant.txt", 100), "K7\n");
    EXPECT_EQ(session->path.find("K7"), std::string::npos);
    const auto simulated =
        createSessionFolder(files, "study", SessionKind::Simulated, std::string(32, '5'), "s");
    ASSERT_TRUE(simulated.ok());
    EXPECT_TRUE(simulated->pilot);
}

TEST(SessionFolder, ListsSessionsOfBothKindsById) {
    MemoryFileSystem files;
    EXPECT_TRUE(listSessionFolders(files, "study")->empty());
    ASSERT_TRUE(createSessionFolder(files, "study", SessionKind::Participant, kSecond, "B").ok());
    ASSERT_TRUE(createSessionFolder(files, "study", SessionKind::Pilot, kFirst, "A").ok());
    ASSERT_TRUE(files.createDirectory("study/sessions/no-session").ok());
    ASSERT_TRUE(files.createDirectory("study/sessions/" + std::string(32, 'a')).ok());
    files.place("study/sessions/" + std::string(32, 'b'), "a file");
    const auto folders = listSessionFolders(files, "study");
    ASSERT_TRUE(folders.ok());
    ASSERT_EQ(folders->size(), 3u);
    EXPECT_EQ((*folders)[0].code, "A");
    EXPECT_TRUE((*folders)[0].pilot);
    EXPECT_EQ((*folders)[1].code, "") << "the power went before its code was written";
    EXPECT_EQ((*folders)[2].code, "B");
    EXPECT_FALSE((*folders)[2].pilot);
}

TEST(SessionFolder, OpensWhatHoldsAJournal) {
    MemoryFileSystem files;
    const auto made = createSessionFolder(files, "study", SessionKind::Pilot, kFirst, "K7");
    ASSERT_TRUE(made.ok());
    EXPECT_EQ(openSessionFolder(files, made->path).error().code, "session.not-a-session");
    files.place(made->journal(), "");
    for (const std::string& path : {made->path, made->path + "/"}) {
        const auto opened = openSessionFolder(files, path);
        ASSERT_TRUE(opened.ok());
        EXPECT_EQ(opened->path, made->path);
        EXPECT_EQ(opened->id, kFirst);
        EXPECT_EQ(opened->code, "K7");
        EXPECT_TRUE(opened->pilot);
        EXPECT_EQ(opened->lockFile(), made->path + "/lock");
    }
    EXPECT_EQ(openSessionFolder(files, "study").error().code, "session.not-a-session");
}

TEST(SessionFolder, ReadsNoCodeFromAFileThatHoldsNone) {
    MemoryFileSystem files;
    files.place("study/sessions/" + kFirst + "/journal.jsonl", "");
    files.place("study/sessions/" + kFirst + "/participant.txt", "Ada Lovelace\n");
    EXPECT_EQ(openSessionFolder(files, "study/sessions/" + kFirst)->code, "");
}

TEST(SessionFolder, TakesCodesButNoNamesOrPaths) {
    for (const std::string& code : {std::string("K7"), std::string("a-B_9"), std::string(64, 'x')})
        EXPECT_TRUE(checkParticipantCode(code).ok()) << code;
    MemoryFileSystem files;
    for (const std::string& code :
         {std::string(), std::string(65, 'x'), std::string("a b"), std::string("../x"), std::string("é"),
          std::string("a\n"), std::string("a\0", 2)}) {
        ASSERT_FALSE(checkParticipantCode(code).ok()) << code;
        EXPECT_EQ(checkParticipantCode(code).error().code, "session.code");
        EXPECT_EQ(createSessionFolder(files, "study", SessionKind::Pilot, kFirst, code).error().code,
                  "session.code");
    }
    EXPECT_EQ(files.kind("study"), EntryKind::Missing) << "nothing was made";
}

TEST(SessionFolder, IsMadeOnceAndOnlyUnderARandomId) {
    MemoryFileSystem files;
    ASSERT_TRUE(createSessionFolder(files, "study", SessionKind::Pilot, kFirst, "A").ok());
    EXPECT_EQ(createSessionFolder(files, "study", SessionKind::Pilot, kFirst, "B").error().code,
              "file.exists");
    for (const char* id : {"", "K7", "../../../../../../../../../../aaa", "00112233445566778899AABBCCDDEEFF"})
        EXPECT_THROW((void)createSessionFolder(files, "study", SessionKind::Pilot, id, "A"),
                     std::invalid_argument);
}

TEST(SessionFolder, DrawsIdsThatDiffer) {
    std::set<std::string> ids;
    for (int i = 0; i < 100; ++i) {
        const std::string id = randomSessionId();
        EXPECT_EQ(id.size(), 32u);
        EXPECT_EQ(id.find_first_not_of("0123456789abcdef"), std::string::npos);
        ids.insert(id);
    }
    EXPECT_EQ(ids.size(), 100u);
}
