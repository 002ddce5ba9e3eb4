#include <gtest/gtest.h>

#include <QApplication>
#include <QFile>
#include <QRegularExpression>
#include <QXmlStreamReader>
#include <set>

#include "station/base/catalogue.h"
#include "station/base/cautions.h"
#include "station/base/problem_table.h"
#include "station/windows/frame/about.h"
#include "station/windows/words/check_words.h"
#include "station/windows/words/languages.h"
#include "station/windows/words/problem_words.h"
#include "station/windows/words/said_words.h"

namespace probewright::windows {
namespace {

struct Message {
  QString context, source, comment, translation;
  bool unfinished = false;
};

std::vector<Message> messages(const QString& name) {
  QFile file{QStringLiteral(PW_SOURCE_DIR "/station/windows/languages/") + name};
  EXPECT_TRUE(file.open(QIODevice::ReadOnly)) << name.toStdString();
  QXmlStreamReader xml{&file};
  std::vector<Message> all;
  QString context;
  while (!xml.atEnd()) {
    if (xml.readNext() != QXmlStreamReader::StartElement) continue;
    if (xml.name() == u"name") context = xml.readElementText();
    if (xml.name() == u"message") all.push_back({context, {}, {}, {}, false});
    if (xml.name() == u"source") all.back().source = xml.readElementText();
    if (xml.name() == u"comment") all.back().comment = xml.readElementText();
    if (xml.name() == u"translation") {
      all.back().unfinished = xml.attributes().value("type") == u"unfinished";
      all.back().translation = xml.readElementText();
    }
  }
  EXPECT_FALSE(xml.hasError()) << xml.errorString().toStdString();
  return all;
}

/// {names} and %1 of a sentence.
std::multiset<QString> gaps(const QString& sentence) {
  std::multiset<QString> found;
  static const QRegularExpression gap{QStringLiteral(R"(\{\w+\}|%\d)")};
  for (auto match = gap.globalMatch(sentence); match.hasNext();) found.insert(match.next().captured());
  return found;
}

TEST(Words, AreCompleteAndKeepTheirGaps) {
  for (const char* language : {"de", "es"}) {
    for (const char* kind : {"windows", "tables"}) {
      const auto all = messages(QStringLiteral("%1_%2.ts").arg(kind, language));
      EXPECT_GT(all.size(), 100u);
      for (const Message& one : all) {
        EXPECT_FALSE(one.unfinished || one.translation.isEmpty()) << language << ": " << one.source.toStdString();
        EXPECT_EQ(gaps(one.source), gaps(one.translation)) << language << ": " << one.translation.toStdString();
      }
    }
  }
}

// A sentence that was changed in the table of problems, or a check that was named anew, would silently fall back to
// English: its translation must follow.
TEST(Words, TablesFollowTheSourcesOfTheProgram) {
  for (const char* language : {"de", "es"}) {
    std::set<QString> checks;
    for (const Message& one : messages(QStringLiteral("tables_%1.ts").arg(language))) {
      if (one.context == "Check") checks.insert(one.source);
      if (one.context == "Cautions") EXPECT_EQ(one.source, QString::fromUtf8(cautions));
      if (one.context != "Problem") continue;
      const ProblemRow* row = find_problem(one.comment.toStdString());
      ASSERT_NE(row, nullptr) << one.comment.toStdString();
      const QString what = QString::fromUtf8(row->what.data()), remedy = QString::fromUtf8(row->remedy.data());
      EXPECT_TRUE(one.source == what || one.source == remedy) << language << ": " << one.source.toStdString();
    }
    for (const Check& check : catalogue())
      EXPECT_TRUE(checks.contains(QString::fromUtf8(check.shown_as.data()))) << language << ": " << check.shown_as;
  }
}

// What an operator can meet at the line. Problems of files and of commands are for those who write files, and are
// English.
TEST(Words, EveryProblemOfTheLineIsTranslated) {
  const char* const ids[] = {"port_missing",
                             "port_busy",
                             "port_permission",
                             "port_failed",
                             "device_lost",
                             "device_reset",
                             "device_refused",
                             "device_fault",
                             "device_stranger",
                             "drive_lost",
                             "ledger_full",
                             "ledger_locked",
                             "ledger_damaged",
                             "ledger_read_only",
                             "ledger_io",
                             "ledger_failed",
                             "ledger_moved_away",
                             "ledger_clock_behind",
                             "lot_card_malformed",
                             "lot_card_model",
                             "lot_card_serial",
                             "scan_empty",
                             "scan_too_long",
                             "scan_control",
                             "scan_unknown",
                             "nobody_signed_in",
                             "person_may_not",
                             "sign_in_while_testing",
                             "no_lot_open",
                             "lot_is_open",
                             "lot_was_closed",
                             "lot_card_differs",
                             "serial_of_other_lot",
                             "serial_passed",
                             "serial_in_nest",
                             "serial_tries_used",
                             "serial_rests",
                             "serial_voided_twice",
                             "other_probe_awaited",
                             "no_nest_empty",
                             "no_nest_free",
                             "probe_in_other_nest",
                             "nest_connecting",
                             "nest_not_there",
                             "nest_idle",
                             "nest_busy",
                             "nest_occupied",
                             "serial_unknown",
                             "purpose_not_possible",
                             "arming_ended",
                             "arming_taken_back",
                             "certificate_ended",
                             "certificate_ends_soon",
                             "lid_opened",
                             "probe_unplugged",
                             "probe_exchanged",
                             "run_too_long",
                             "run_stage_lost",
                             "our_bug",
                             "setup_no_device",
                             "setup_nest_incomplete",
                             "port_unknown_device"};
  Languages languages;
  for (const char* language : {"de", "es"}) {
    languages.choose(language);
    for (const char* id : ids) {
      const Problem problem{id, ""};
      EXPECT_NE(what_words(problem).toLower(), QString::fromStdString(problem.what() + ".").toLower())
          << language << " " << id;
      EXPECT_NE(remedy_words(problem).toLower(), QString::fromStdString(problem.remedy() + ".").toLower())
          << language << " " << id;
    }
  }
  languages.choose("en");
}

TEST(Words, SentencesOfTheLineAreFoundByTheirPattern) {
  Languages languages;
  EXPECT_EQ(said("put probe AQ20-048-00140 into nest 4"), "put probe AQ20-048-00140 into nest 4");
  languages.choose("de");
  EXPECT_EQ(said("put probe AQ20-048-00140 into nest 4"), "Sonde AQ20-048-00140 in Nest 4 legen");
  EXPECT_EQ(said("Imre Vasko, operator, is signed in"), "Imre Vasko, Bedienung, ist angemeldet");
  EXPECT_EQ(said("phantom of nest 12"), "Phantom von Nest 12");
  EXPECT_EQ(said("something that nobody foresaw"), "something that nobody foresaw");
  EXPECT_EQ(check_words("dark_current"), "Dunkelstrom");
  EXPECT_TRUE(caution_words().contains("Entsättigungsstudien"));
  languages.choose("en");
  EXPECT_EQ(check_words("dark_current"), "dark current");
}

TEST(Words, ArgumentsMayHoldBraces) {
  const Problem problem{"our_bug", "nest 1", {{"what", "{what} went {wrong}"}}};
  EXPECT_EQ(what_words(problem), "Nest 1: the program made a mistake: {what} went {wrong}.");
}

}  // namespace
}  // namespace probewright::windows
