// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/journal/journal.h"

#include "core/files/sha256.h"
#include "core/journal/format.h"
#include "tests/support/manual_clock.h"
#include "tests/support/memory_file_system.h"
#include "tests/support/small_study.h"

#include <gtest/gtest.h>
#include <limits>

using namespace whichway;

namespace {

using Loss = MemoryFileSystem::Loss;

const std::string kPath = "s/journal.jsonl";

std::vector<Event> someEvents() {
    SessionBegan began{.session = std::string(32, '0'), .program = "test", .language = "en", .seed = 1};
    began.protocol = smallStudy(2, 1).protocol;
    return {began,
            InstructionShown{.page = 1},
            PlanAdopted{.request = 1, .pairs = {{"m000", "m001"}}, .information = {0.5}},
            TrialShown{.trial = 1, .left = "m000", .right = "m001"},
            AnswerGiven{.trial = 1, .answer = 2, .responseTime = 1.5},
            NoteTaken{.trial = 0, .text = "coughs\n“loudly”"},
            SessionEnded{}};
}

MemoryFileSystem freshFiles() {
    MemoryFileSystem files;
    files.place("s/participant.txt", "K7\n");
    return files;
}

std::string goodJournal() {
    MemoryFileSystem files = freshFiles();
    const ManualClock clock;
    auto writer = JournalWriter::create(files, clock, kPath);
    for (const Event& event : someEvents())
        EXPECT_TRUE(writer->append(event).ok());
    return *files.read(kPath, 1 << 20);
}

Result<JournalReading> readingOf(const std::string& content) {
    MemoryFileSystem files;
    files.place(kPath, content);
    auto reading = readJournal(files, kPath);
    EXPECT_EQ(*files.read(kPath, 1 << 20), content) << "reading changes nothing";
    return reading;
}

std::vector<std::size_t> lineEnds(const std::string& content) {
    std::vector<std::size_t> ends;
    for (std::size_t i = 0; i < content.size(); ++i)
        if (content[i] == '\n')
            ends.push_back(i + 1);
    return ends;
}

void expectEvents(const std::vector<Record>& records, const std::vector<Event>& events, std::size_t count) {
    ASSERT_EQ(records.size(), count);
    for (std::size_t i = 0; i < count; ++i) {
        EXPECT_EQ(records[i].number, i + 1);
        EXPECT_TRUE(records[i].event == events[i]) << "event " << i + 1;
    }
}

} // namespace

TEST(Journal, GivesBackWhatWasAppended) {
    MemoryFileSystem files = freshFiles();
    ManualClock clock;
    auto writer = JournalWriter::create(files, clock, kPath);
    ASSERT_TRUE(writer.ok());
    std::vector<Record> written;
    for (const Event& event : someEvents()) {
        clock.advance(std::chrono::milliseconds(1500));
        auto record = writer->append(event);
        ASSERT_TRUE(record.ok());
        written.push_back(*record);
    }
    const auto reading = readJournal(files, kPath);
    ASSERT_TRUE(reading.ok());
    EXPECT_TRUE(reading->records == written);
    EXPECT_EQ(reading->tornBytes, 0u);
    EXPECT_EQ(reading->goodBytes, files.read(kPath, 1 << 20)->size());
    EXPECT_EQ(written[1].monotonic - written[0].monotonic, 1500000000);
    EXPECT_EQ(written[0].time, clock.wallTime());
    EXPECT_EQ(written[0].run, 1);
}

TEST(Journal, NamesInEachLineTheHashOfTheOneBefore) {
    const std::string content = goodJournal();
    std::string previous(kJournalRoot);
    std::size_t begin = 0;
    for (const std::size_t end : lineEnds(content)) {
        const std::string line = content.substr(begin, end - begin - 1);
        EXPECT_NE(line.find("\"previous\":\"" + previous + "\",\"hash\":\""), std::string::npos);
        // As documented: the line as it stands without the field of its hash.
        const std::size_t field = line.size() - std::string(R"(,"hash":""})").size() - 64;
        previous = sha256(line.substr(0, field) + "}");
        EXPECT_EQ(line.substr(line.size() - 66), previous + "\"}");
        begin = end;
    }
}

TEST(Journal, CutAnywhereGivesThePrefixOfItsEvents) {
    const std::string content = goodJournal();
    const std::vector<std::size_t> ends = lineEnds(content);
    const std::vector<Event> events = someEvents();
    ASSERT_EQ(ends.size(), events.size());
    for (std::size_t length = 0; length <= content.size(); ++length) {
        SCOPED_TRACE("the first " + std::to_string(length) + " bytes");
        const auto reading = readingOf(content.substr(0, length));
        ASSERT_TRUE(reading.ok()) << describe(reading.error());
        std::size_t whole = 0;
        while (whole < ends.size() && ends[whole] <= length)
            ++whole;
        expectEvents(reading->records, events, whole);
        const std::size_t good = whole ? ends[whole - 1] : 0;
        ASSERT_EQ(reading->goodBytes, good);
        ASSERT_EQ(reading->tornBytes, length - good);
        ASSERT_EQ(reading->torn, content.substr(good, length - good));
    }
}

// Also the line breaks, whose loss joins two lines, and bytes that become a line break.
TEST(Journal, TellsWhichEventIsDamagedWhicheverByteOfALineBeforeTheLastIsFlipped) {
    const std::string content = goodJournal();
    const std::vector<std::size_t> ends = lineEnds(content);
    const std::size_t lastBegins = ends[ends.size() - 2];
    for (std::size_t at = 0; at < lastBegins; ++at) {
        for (const int flip : {1, 0x80, content[at] ^ '\n'}) {
            if (flip == 0)
                continue;
            std::string damaged = content;
            damaged[at] = static_cast<char>(damaged[at] ^ flip);
            const auto reading = readingOf(damaged);
            ASSERT_FALSE(reading.ok()) << "byte " << at << " xor " << flip;
            ASSERT_EQ(reading.error().code, "journal.corrupt");
            ASSERT_EQ(reading.error().place.file, kPath);
            int line = 1;
            for (const std::size_t end : ends)
                line += end <= at ? 1 : 0;
            ASSERT_EQ(reading.error().place.line, line) << "byte " << at;
        }
    }
}

TEST(Journal, NeverTakesADamagedLastLineForAnEvent) {
    const std::string content = goodJournal();
    const std::vector<std::size_t> ends = lineEnds(content);
    const std::size_t lastBegins = ends[ends.size() - 2];
    for (std::size_t at = lastBegins; at < content.size(); ++at) {
        std::string damaged = content;
        damaged[at] = static_cast<char>(damaged[at] ^ 1);
        const auto reading = readingOf(damaged);
        ASSERT_TRUE(reading.ok());
        expectEvents(reading->records, someEvents(), ends.size() - 1);
        ASSERT_EQ(reading->torn, damaged.substr(lastBegins));
    }
}

TEST(Journal, RefusesLinesThatWereTakenOutDoubledOrSwapped) {
    const std::string content = goodJournal();
    const std::vector<std::size_t> ends = lineEnds(content);
    const auto line = [&](std::size_t i) {
        return content.substr(i ? ends[i - 1] : 0, ends[i] - (i ? ends[i - 1] : 0));
    };
    for (std::size_t i = 0; i + 2 < ends.size(); ++i) {
        std::string without, doubled, swapped;
        for (std::size_t j = 0; j < ends.size(); ++j) {
            without += j == i ? "" : line(j);
            doubled += j == i ? line(j) + line(j) : line(j);
            swapped += j == i ? line(j + 1) : j == i + 1 ? line(i) : line(j);
        }
        for (const std::string& forged : {without, doubled, swapped}) {
            const auto reading = readingOf(forged);
            ASSERT_FALSE(reading.ok());
            EXPECT_EQ(reading.error().code, "journal.corrupt");
        }
    }
}

TEST(Journal, CutsATornTailOffWhenItGoesOnAndKeepsItBeside) {
    const std::string content = goodJournal();
    const std::string tail = R"({"format":1,"number":8,"ty)";
    MemoryFileSystem files;
    files.place(kPath, content + tail);
    const ManualClock clock;
    const auto reading = readJournal(files, kPath);
    ASSERT_TRUE(reading.ok());
    auto writer = JournalWriter::resume(files, clock, kPath, *reading);
    ASSERT_TRUE(writer.ok());
    EXPECT_EQ(*files.read(kPath, 1 << 20), content);
    EXPECT_EQ(*files.read(kPath + ".torn-8", 1000), tail);
    const auto record = writer->append(NoteTaken{.text = "later"});
    ASSERT_TRUE(record.ok());
    EXPECT_EQ(record->number, 8u);
    EXPECT_EQ(record->run, 2);
    const auto after = readJournal(files, kPath);
    ASSERT_TRUE(after.ok());
    EXPECT_EQ(after->records.size(), 8u);
    EXPECT_TRUE(after->records.back() == *record);
}

TEST(Journal, IsNotBegunTwice) {
    MemoryFileSystem files = freshFiles();
    const ManualClock clock;
    ASSERT_TRUE(JournalWriter::create(files, clock, kPath).ok());
    const auto again = JournalWriter::create(files, clock, kPath);
    ASSERT_FALSE(again.ok());
    EXPECT_EQ(again.error().code, "file.exists");
}

TEST(Journal, PassesTheFileSystemsErrorsOn) {
    MemoryFileSystem files;
    const ManualClock clock;
    EXPECT_EQ(readJournal(files, kPath).error().code, "file.missing");
    EXPECT_EQ(JournalWriter::create(files, clock, "nowhere/journal.jsonl").error().code, "file.missing");
}

TEST(Journal, RefusesANumberThatCouldNotBeReadBackAndCanGoOn) {
    MemoryFileSystem files = freshFiles();
    const ManualClock clock;
    auto writer = JournalWriter::create(files, clock, kPath);
    ASSERT_TRUE(writer.ok());
    const double infinity = std::numeric_limits<double>::infinity();
    EXPECT_THROW((void)writer->append(AnswerGiven{.responseTime = infinity}), std::invalid_argument);
    EXPECT_TRUE(writer->append(WentOn{}).ok());
    const auto reading = readJournal(files, kPath);
    ASSERT_TRUE(reading.ok());
    EXPECT_EQ(reading->records.size(), 1u);
}

// Each step on the disk (write, sync, cut, …) fails once; two in a row; every third: a refused event is not
// there, the same one tried again is there once, and nothing else changes.
TEST(Journal, KeepsEachRecordOnceWhicheverStepsFail) {
    const std::vector<Event> events = someEvents();
    const ManualClock clock;
    for (const std::uint64_t again : {0u, 1u, 2u, 3u})
        for (std::uint64_t failing = 1; failing <= 40; ++failing) {
            SCOPED_TRACE("step " + std::to_string(failing) + ", then each " + std::to_string(again) +
                         " later");
            MemoryFileSystem files = freshFiles();
            auto writer = JournalWriter::create(files, clock, kPath);
            ASSERT_TRUE(writer.ok());
            files.failStep(failing);
            int refused = 0;
            for (std::size_t i = 0; i < events.size(); ++i) {
                int tries = 0;
                for (;;) {
                    ASSERT_LT(++tries, 12);
                    const auto record = writer->append(events[i]);
                    if (record) {
                        EXPECT_EQ(record->number, i + 1);
                        break;
                    }
                    EXPECT_EQ(record.error().code, "file.disk-full");
                    if (++refused < 8 && again > 0)
                        files.failStep(again);
                }
                const auto reading = readJournal(files, kPath);
                ASSERT_TRUE(reading.ok()) << describe(reading.error());
                expectEvents(reading->records, events, i + 1);
                ASSERT_EQ(reading->tornBytes, 0u);
            }
            EXPECT_EQ(refused > 0, failing <= 2 * events.size());
        }
}

class JournalPowerCut : public ::testing::TestWithParam<Loss> {};

// Power cuts one after the other: after every single step, and again after every step of what follows. Each
// append that returned is there once and unchanged; the one under way may be there or not; and the journal
// goes on.
TEST_P(JournalPowerCut, KeepsEachConfirmedRecordExactlyOnce) {
    const std::vector<Event> events = someEvents();
    const ManualClock clock;
    for (std::uint64_t first = 0; first <= 18; ++first)
        for (std::uint64_t second = 0; second <= 18; ++second)
            for (std::uint64_t seed = 1; seed <= (GetParam() == Loss::Forget ? 1u : 6u); ++seed) {
                SCOPED_TRACE("cuts after " + std::to_string(first) + " and " + std::to_string(second) +
                             " steps, seed " + std::to_string(seed));
                MemoryFileSystem files = freshFiles();
                std::size_t confirmed = 0;
                for (const std::uint64_t cut : {first, second, std::uint64_t{100000}}) {
                    files.cutPowerAfter(cut);
                    auto reading = readJournal(files, kPath);
                    if (!reading) {
                        ASSERT_EQ(reading.error().code, "file.missing");
                        ASSERT_EQ(confirmed, 0u);
                    } else {
                        ASSERT_GE(reading->records.size(), confirmed);
                        ASSERT_LE(reading->records.size(), confirmed + 1);
                        expectEvents(reading->records, events, reading->records.size());
                        confirmed = reading->records.size();
                    }
                    {
                        auto writer = reading ? JournalWriter::resume(files, clock, kPath, *reading)
                                              : JournalWriter::create(files, clock, kPath);
                        while (writer && confirmed < events.size() && writer->append(events[confirmed]))
                            ++confirmed;
                    }
                    if (!files.powerIsOff())
                        break;
                    files = files.afterReboot(GetParam(), 1000 * seed + 20 * first + second);
                }
                const auto reading = readJournal(files, kPath);
                ASSERT_TRUE(reading.ok());
                expectEvents(reading->records, events, events.size());
                ASSERT_EQ(reading->tornBytes, 0u);
            }
}

INSTANTIATE_TEST_SUITE_P(Losses, JournalPowerCut, ::testing::Values(Loss::Forget, Loss::Garble),
                         [](const auto& tested) {
                             return tested.param == Loss::Forget ? "Forget" : "Garble";
                         });
