#include "station/trace/lists.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "station/trace/history.h"
#include "station/trace/words.h"
#include "tests/made/ledger.h"

namespace probewright::trace {
namespace {

using testing::ElementsAre;

/// Two lots by two people, with labels and sign-ins.
class Lists : public testing::Test {
 protected:
  Lists() {
    at("2026-12-01T05:00:00Z");
    sign_in("Imre Vasko");
    ledger.entry("lot_opened", "Imre Vasko",
                 Body::Object{{"first_serial", "AQ20-048-00001"},
                              {"last_serial", "AQ20-048-00050"},
                              {"lot", "AQ20-W48-07"},
                              {"model", "AQ-20"},
                              {"quantity", 50},
                              {"sheet", "AQ-20 revision 4"}});
    first = ledger.run({.serial = "AQ20-048-00001"});
    label = ledger.entry("label_made", "station",
                         Body::Object{{"copy", 1},
                                      {"kind", "pass"},
                                      {"lot", "AQ20-W48-07"},
                                      {"reason", ""},
                                      {"run", first.value},
                                      {"serial", "AQ20-048-00001"}});
    at("2026-12-01T23:30:00Z");  // in the plant it is the next day
    ledger.entry("sign_out", "station", Body::Object{{"person", "Imre Vasko"}});
    sign_in("Dalia Oduya");
    second = ledger.run({.serial = "AQ20-049-00001", .lot = "AQ20-W49-01", .operator_name = "Dalia Oduya"});
    third = ledger.run({.serial = "AQ20-048-00001", .operator_name = "Dalia Oduya"});
  }
  void at(std::string_view utc) { ledger.clock().put(utc); }
  void sign_in(const std::string& person) {
    ledger.entry("sign_in", person, Body::Object{{"person", person}, {"role", "operator"}});
  }
  static std::vector<std::int64_t> runs_of(const Found& found) {
    std::vector<std::int64_t> runs;
    for (const db::RunBrief& run : found.runs) runs.push_back(run.run.value);
    return runs;
  }
  static std::vector<std::string> kinds_of(const std::vector<db::EntryRecord>& entries) {
    std::vector<std::string> kinds;
    for (const db::EntryRecord& entry : entries) kinds.push_back(entry.kind);
    return kinds;
  }

  made::Folder folder;
  made::Ledger ledger{folder.file("ledger.db")};
  db::RunId first, second, third;
  std::int64_t label = 0;
};

TEST_F(Lists, ALotHasItsRunsItsOpeningAndItsLabels) {
  auto reader = ledger.reader();
  const Found found = found_of_lot(reader, "AQ20-W48-07");
  EXPECT_THAT(runs_of(found), ElementsAre(first.value, third.value));
  EXPECT_THAT(kinds_of(found.entries), ElementsAre("lot_opened", "label_made"));
  EXPECT_TRUE(found_of_lot(reader, "AQ20-W48").empty()) << "a part of a lot's name is another lot";
}

TEST_F(Lists, APersonHasRunsAndEntriesMadeByOrNamingThem) {
  auto reader = ledger.reader();
  const Found imre = found_of_person(reader, "Imre Vasko");
  EXPECT_THAT(runs_of(imre), ElementsAre(first.value));
  EXPECT_THAT(kinds_of(imre.entries), ElementsAre("sign_in", "lot_opened", "sign_out"));
  EXPECT_THAT(runs_of(found_of_person(reader, "Dalia Oduya")), ElementsAre(second.value, third.value));
}

TEST_F(Lists, ADayIsAPeriodOfThePlant) {
  auto reader = ledger.reader();
  const Zone zone = Zone::read("Europe/Amsterdam").value();
  const Found one = found_within(reader, day_in(zone, "2026-12-01").value());
  EXPECT_THAT(runs_of(one), ElementsAre(first.value));
  const Found two = found_within(reader, day_in(zone, "2026-12-02").value());
  EXPECT_THAT(runs_of(two), ElementsAre(second.value, third.value));
  EXPECT_THAT(kinds_of(two.entries), ElementsAre("sign_out", "sign_in"));
  EXPECT_TRUE(found_within(reader, day_in(zone, "2026-12-03").value()).empty());
}

TEST_F(Lists, AnEntryLeadsToItsRun) {
  auto reader = ledger.reader();
  EXPECT_EQ(found_entry(reader, label)->run->run, first);
  EXPECT_EQ(found_entry(reader, first.value)->run->run, first);
  EXPECT_EQ(found_entry(reader, first.value + 1)->run->run, first);
  EXPECT_FALSE(found_entry(reader, 1)->run);
  EXPECT_EQ(found_entry(reader, 9999).error().id, "entry_unknown");
}

// Both sign-ins under which it was tested, its lot, its label; the sign-out names no run and no serial.
TEST_F(Lists, AHistoryHasWhatBelongsToItsRuns) {
  auto reader = ledger.reader();
  EXPECT_THAT(kinds_of(history_of(reader, "AQ20-048-00001").entries),
              ElementsAre("sign_in", "lot_opened", "label_made", "sign_in"));
}

TEST_F(Lists, EntriesAreToldInOneLine) {
  auto reader = ledger.reader();
  const Found lot = found_of_lot(reader, "AQ20-W48-07");
  EXPECT_EQ(entry_words(lot.entries[0]),
            "AQ20-W48-07, AQ-20, 50 probes, AQ20-048-00001 to AQ20-048-00050, sheet AQ-20 revision 4");
  EXPECT_EQ(entry_words(lot.entries[1]), "pass label of run " + std::to_string(first.value));
  db::EntryRecord reprint = lot.entries[1];
  reprint.data = Body::Object{{"copy", 2}, {"kind", "pass"}, {"reason", "smudged"}, {"run", first.value}};
  EXPECT_EQ(entry_words(reprint), "pass label of run " + std::to_string(first.value) + ", copy 2: smudged");
  db::EntryRecord other;
  other.kind = "probe_held";
  other.data = Body::Object{{"digest", std::string(64, 'a')}, {"reason", "odd smell"}, {"tries", 2}, {"urgent", true}};
  EXPECT_EQ(entry_words(other), "reason: odd smell; tries: 2; urgent: yes");
}

}  // namespace
}  // namespace probewright::trace
