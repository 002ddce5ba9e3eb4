#include "station/sequence/labels.h"

#include <gtest/gtest.h>

#include <fstream>
#include <sstream>

#include "db/queries/entries.h"
#include "db/queries/labels.h"
#include "db/verify.h"
#include "tests/made/ledger.h"

namespace probewright::sequence {
namespace {

std::string model_text() {
  std::ifstream file{std::string{PW_SOURCE_DIR} + "/configs/models/aq-20.yaml"};
  std::ostringstream text;
  text << file.rdbuf();
  return text.str();
}

constexpr const char* serial = "AQ20-048-00137";
made::Run passed() { return {.serial = serial}; }
made::Run failed() { return {.serial = serial, .verdict = "fail", .readings = {made::dark_current(6.0)}}; }

class LabelEntries : public testing::Test {
 protected:
  LabelEntries() {
    ledger.use({"model", "AQ-20", "1", model_text(), "station"});
    ledger.clock().put("2026-12-01T23:30:00Z");  // 2026-12-02 in the plant
  }
  Result<LabelFacts> facts(db::RunId run) {
    auto reader = ledger.reader();
    return label_facts(reader, run, zone);
  }
  std::string refusal(db::RunId run) {
    const auto told = facts(run);
    return told ? "none" : told.error().id;
  }
  /// The number of the entry, or the problem's id.
  std::string made(const LabelEntry& label) {
    std::int64_t entry = 0;
    const auto done = ledger.store().commit([&](db::Change& change) { entry = make_label_entry(change, label); });
    return done ? std::to_string(entry) : done.error().id;
  }
  std::vector<db::LabelRecord> labels() {
    auto reader = ledger.reader();
    return db::labels_of_serial(reader, serial);
  }

  made::Folder folder;
  made::Ledger ledger{folder.file("ledger.db")};
  const Zone zone = Zone::read("Europe/Amsterdam").value();
};

TEST_F(LabelEntries, APassedRunTellsWhatStandsOnItsLabel) {
  const auto run = ledger.run(passed());
  const LabelFacts told = facts(run).value();
  EXPECT_EQ(told.run, run.value);
  EXPECT_EQ(told.kind, LabelKind::pass);
  EXPECT_EQ(told.verdict + told.purpose, "passproduction");
  EXPECT_TRUE(told.emulated);
  EXPECT_EQ(told.model, "AQ-20");
  EXPECT_EQ(told.serial, serial);
  EXPECT_EQ(told.lot, "AQ20-W48-07");
  EXPECT_EQ(told.production_date, "2026-12-02");
  EXPECT_EQ(told.gtin, "09520000000202");
  EXPECT_EQ(told.copy, 1);
}

TEST_F(LabelEntries, AModelWithoutGtinOrOneThatCannotBeReadHasNone) {
  ledger.use({"model", "AQ-20", "1", "model: AQ-20\n", "station"});
  EXPECT_EQ(facts(ledger.run(passed()))->gtin, "");
}

TEST_F(LabelEntries, OnlyTheLastProductionRunWithAVerdictHasOne) {
  const auto first = ledger.run(failed());
  const auto engineering = ledger.run({.serial = serial, .purpose = "engineering"});
  EXPECT_EQ(facts(first)->kind, LabelKind::fail) << "an engineering run changes nothing";
  EXPECT_EQ(facts(first)->internal_code, "RUN-" + std::to_string(first.value));
  EXPECT_EQ(refusal(engineering), "label_not_production");
  const auto second = ledger.run(passed());
  EXPECT_EQ(refusal(first), "label_not_last");
  EXPECT_EQ(refusal(second), "none");
  const auto third = ledger.run({.serial = serial, .verdict = "void", .readings = {}});
  EXPECT_EQ(refusal(second), "label_not_last");
  EXPECT_EQ(refusal(third), "label_void");
  const auto fourth = ledger.run({.serial = serial, .verdict = ""});
  EXPECT_EQ(refusal(fourth), "label_run_open");
  EXPECT_EQ(refusal({1}), "run_unknown");
  auto reader = ledger.reader();
  EXPECT_EQ(label_facts_of_serial(reader, serial, zone).error().id, "label_run_open");
  EXPECT_EQ(label_facts_of_serial(reader, "AQ20-048-99999", zone).error().id, "label_no_run");
}

TEST_F(LabelEntries, TheEntrySaysWhatWasMade) {
  const auto run = ledger.run(passed());
  const std::string code =
      "010952000000020211261202"
      "10AQ20-W48-07\x1d"
      "21AQ20-048-00137";
  const std::string entry = made({run, LabelKind::pass, 1, code, "", "Imre Vasko"});
  ASSERT_EQ(labels().size(), 1u);
  EXPECT_EQ(std::to_string(labels()[0].entry), entry);
  EXPECT_EQ(labels()[0].run, run);
  EXPECT_EQ(labels()[0].who, "Imre Vasko");
  EXPECT_EQ(labels()[0].kind, "pass");
  EXPECT_EQ(labels()[0].code, code) << "separators and all";
  auto reader = ledger.reader();
  const auto written = db::entries(reader, labels()[0].entry, labels()[0].entry).at(0);
  EXPECT_EQ(written.data.text("lot"), "AQ20-W48-07");
  EXPECT_EQ(written.data.text("model"), "AQ-20");
  EXPECT_TRUE(db::verify(ledger.path()).value().ok());
}

TEST_F(LabelEntries, APassLabelIsRefusedForARunThatFailed) {
  const auto run = ledger.run(failed());
  EXPECT_EQ(made({run, LabelKind::pass, 1, "x", "", "station"}), "label_not_passed");
  EXPECT_TRUE(labels().empty());
  EXPECT_NE(made({run, LabelKind::fail, 1, "RUN-1", "", "station"}), "label_not_failed");
  EXPECT_EQ(labels().size(), 1u);
  const auto next = ledger.run(passed());
  EXPECT_EQ(made({next, LabelKind::fail, 1, "x", "", "station"}), "label_not_failed");
  EXPECT_EQ(made({run, LabelKind::fail, 2, "RUN-1", "smudged", "station"}), "label_not_last");
}

TEST_F(LabelEntries, AReprintNeedsItsReasonAndTheNextCopyNumber) {
  const auto run = ledger.run(passed());
  EXPECT_EQ(made({run, LabelKind::pass, 2, "x", "smudged", "station"}), "label_copy_taken") << "there is no first";
  made({run, LabelKind::pass, 1, "x", "", "station"});
  EXPECT_EQ(facts(run)->copy, 2);
  EXPECT_EQ(made({run, LabelKind::pass, 1, "x", "smudged", "station"}), "label_copy_taken");
  EXPECT_EQ(made({run, LabelKind::pass, 2, "x", "", "station"}), "label_reason_missing");
  EXPECT_EQ(made({run, LabelKind::pass, 2, "", "smudged", "station"}), "label_no_code");
  EXPECT_EQ(labels().size(), 1u);
  made({run, LabelKind::pass, 2, "x", "smudged", "Imre Vasko"});
  ASSERT_EQ(labels().size(), 2u);
  EXPECT_EQ(labels()[1].copy, 2);
  EXPECT_EQ(labels()[1].reason, "smudged");
  EXPECT_EQ(facts(run)->copy, 3);
}

}  // namespace
}  // namespace probewright::sequence
