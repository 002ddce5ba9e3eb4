#include <gtest/gtest.h>

#include <QApplication>
#include <QTest>

#include "stage.h"
#include "station/windows/frame/sheet.h"
#include "station/windows/line/berth_grid.h"
#include "station/windows/line/scan_field.h"
#include "station/windows/look/label.h"

// What an operator does at the line, with real key presses, and what the window says.
namespace probewright::windows {
namespace {

using namespace sequence;

TEST(ScanField, SendsWhatWasTypedAndIsEmptyAgain) {
  Stage stage{busy_scene(4)};
  QTest::keyClicks(&stage.edit(), "AQ20-048-00140");
  EXPECT_EQ(stage.edit().displayText(), "AQ20-048-00140");
  QTest::keyClick(&stage.edit(), Qt::Key_Return);
  ASSERT_EQ(stage.line.requests.size(), 1u);
  EXPECT_EQ(std::get<Scan>(stage.line.requests[0]).text, "AQ20-048-00140");
  EXPECT_TRUE(stage.edit().text().isEmpty());
}

// A badge is read like "AQS-7Q41-IV": it begins like a serial, and is hidden from the first sign on that no serial has.
TEST(ScanField, DoesNotShowWhatCouldBeABadge) {
  Stage stage{busy_scene(1)};
  QTest::keyClicks(&stage.edit(), "AQS-7Q41-IV");
  EXPECT_EQ(stage.edit().echoMode(), QLineEdit::Password);
  EXPECT_FALSE(stage.edit().displayText().contains(QLatin1Char('S')));
  QTest::keyClick(&stage.edit(), Qt::Key_Return);
  EXPECT_EQ(std::get<Scan>(stage.line.requests.at(0)).text, "AQS-7Q41-IV");
  for (const char* shown : {"LOT/AQ20-W48-07/AQ-20/48/AQ20-048-00001", "nest 3", "NEST 12", "AQ20-0"}) {
    stage.edit().clear();
    QTest::keyClicks(&stage.edit(), shown);
    EXPECT_EQ(stage.edit().displayText(), shown);
  }
}

TEST(ScanField, KeepsTheFocus) {
  Stage stage{busy_scene(4)};
  EXPECT_TRUE(stage.edit().hasFocus());
  QTest::keyClick(&stage.edit(), Qt::Key_Tab);
  QTest::mouseClick(stage.window->line().grid().berths()[1], Qt::LeftButton);
  stage.edit().clearFocus();
  EXPECT_TRUE(QTest::qWaitFor([&] { return stage.edit().hasFocus(); }, 2000));
}

TEST(Line, ArrowsChooseABerthAndEnterShowsItsReadings) {
  Stage stage{busy_scene(4)};
  EXPECT_EQ(stage.window->line().grid().chosen(), 1);
  QTest::keyClick(&stage.edit(), Qt::Key_Right);
  EXPECT_EQ(stage.window->line().grid().chosen(), 2);
  QTest::keyClick(&stage.edit(), Qt::Key_Return);
  Sheet& sheet = stage.find<Sheet>("sheet");
  EXPECT_TRUE(sheet.is_open());
  EXPECT_EQ(sheet.accessibleName(), "AQ20-048-00138 in nest 2: Fail");
  stage.picture("readings_light");
  QTest::keyClick(&stage.edit(), Qt::Key_Escape);
  EXPECT_FALSE(sheet.is_open());
  QTest::keyClick(&stage.edit(), Qt::Key_Right);
  QTest::keyClick(&stage.edit(), Qt::Key_Return);  // nest 3 is still running its first probe
  EXPECT_FALSE(sheet.is_open());
  EXPECT_EQ(stage.find<Label>("answer").text(), "Nest 3 has no finished run yet.");
}

TEST(Line, AScanClosesTheSheetAndCounts) {
  Stage stage{busy_scene(4)};
  stage.window->show_help();
  EXPECT_TRUE(stage.find<Sheet>("sheet").is_open());
  QTest::keyClicks(&stage.edit(), "AQ20-048-00140");
  QTest::keyClick(&stage.edit(), Qt::Key_Return);
  EXPECT_FALSE(stage.find<Sheet>("sheet").is_open());
  EXPECT_EQ(stage.line.requests.size(), 1u);
}

TEST(Line, StoppingANestIsAskedForTwice) {
  Stage stage{busy_scene(4)};
  QTest::keyClick(&stage.edit(), Qt::Key_Right);
  QTest::keyClick(&stage.edit(), Qt::Key_Right);
  QTest::keyClick(&stage.edit(), Qt::Key_F8);
  EXPECT_TRUE(stage.line.requests.empty());
  EXPECT_EQ(stage.find<Label>("answer").text(), "Stop nest 3? Press F8 once more.");
  QTest::keyClick(&stage.edit(), Qt::Key_F8);
  ASSERT_EQ(stage.line.requests.size(), 1u);
  EXPECT_EQ(std::get<StopNest>(stage.line.requests[0]).nest, 3);
  EXPECT_EQ(std::get<StopNest>(stage.line.requests[0]).who, "Imre Vasko");
  QTest::keyClick(&stage.edit(), Qt::Key_F8);  // a new question
  EXPECT_EQ(stage.line.requests.size(), 1u);
}

TEST(Line, SignsOutByKey) {
  Stage stage{busy_scene(1)};
  QTest::keyClick(&stage.edit(), Qt::Key_F9);
  ASSERT_EQ(stage.line.requests.size(), 1u);
  EXPECT_TRUE(std::holds_alternative<SignOut>(stage.line.requests[0]));
}

TEST(Line, AnswersInWordsOfTheProblem) {
  Stage stage{busy_scene(4)};
  stage.model->hear(
      Answered{false, "", Problem{"serial_tries_used", "line", {{"serial", "AQ20-048-00007"}, {"tries", "2"}}}});
  EXPECT_EQ(stage.find<Label>("answer").text(),
            "AQ20-048-00007 has had all its 2 tries. Put it on the tray for failed probes.");
  stage.picture("wrong_scan");
  stage.model->hear(Answered{true, "put probe AQ20-048-00139 into nest 4", {}, 4});
  EXPECT_EQ(stage.find<Label>("answer").text(), "Put probe AQ20-048-00139 into nest 4.");
}

TEST(Line, AnAnswerEndsWithTheRunThatItAskedFor) {
  Scene scene = busy_scene(4);
  Stage stage{scene};
  stage.model->hear(Answered{true, "put probe AQ20-048-00140 into nest 4", {}, 4});
  stage.model->hear(RunEnded{some_outcome(2, "AQ20-048-00138", 1.0, 2)});
  EXPECT_EQ(stage.find<Label>("answer").text(), "Put probe AQ20-048-00140 into nest 4.");
  stage.model->hear(RunEnded{some_outcome(4, "AQ20-048-00140", 1.0, 4)});
  EXPECT_EQ(stage.find<Label>("answer").text(), "Scan a probe.");
}

TEST(Berths, AnUnchangedBerthIsNotDrawnAgain) {
  Scene scene = busy_scene(4);
  Stage stage{scene};
  stage.window->repaint();
  const auto drawn = [&](std::size_t i) { return stage.window->line().grid().berths()[i]->drawn_parts(); };
  std::vector<int> before;
  for (std::size_t i = 0; i < 4; ++i) before.push_back(drawn(i));
  scene.view.berths[2].progress += 0.05;
  stage.show(scene.view);
  EXPECT_EQ(drawn(0), before[0]);
  EXPECT_EQ(drawn(1), before[1]);
  EXPECT_EQ(drawn(2), before[2] + 1);  // its bar alone
  EXPECT_EQ(drawn(3), before[3]);
  stage.window->hide();
  scene.view.berths[2].progress += 0.05;
  stage.show(scene.view);
  EXPECT_EQ(drawn(2), before[2] + 1);
}

TEST(Berths, SayWhatTheyShow) {
  Stage stage{busy_scene(4)};
  const auto& berths = stage.window->line().grid().berths();
  EXPECT_EQ(berths[1]->accessibleName(),
            "Nest 2. AQ20-048-00138. Fail. Take the probe out and put it on the tray for RW-10 exchange the detector. "
            "Dark current "
            "5.10\u00a0nA, accepted up to 4.60\u00a0nA. Likely cause: leaky detector.");
  EXPECT_EQ(berths[3]->accessibleName(),
            "Nest 4. AQ20-048-00140. 14 s left. Put it in. Put probe AQ20-048-00140 into nest 4.");
}

// Between verdict and the next scan the probe leaves the nest: what is left to do stays in sight, without "take it
// out".
TEST(Berths, AfterTheProbeIsOutTheRestOfTheWorkStays) {
  BerthView berth = ended_berth(some_outcome(1, "AQ20-048-00137", 1.0, 1));
  berth.nest.state = NestState::empty;
  const BerthContent content = berth_content(berth, nullptr);
  EXPECT_EQ(content.headline, "Pass");
  EXPECT_EQ(content.note, "empty again");
  EXPECT_EQ(content.to_do, "Apply its label.");
  EXPECT_FALSE(content.washed);
}

TEST(Berths, AVoidStaysInSightWhileItsNestIsNotReady) {
  RunOutcome outcome = some_outcome(1, "AQ20-048-00137", 1.0, 1);
  outcome.verdict = RunVerdict::void_run, outcome.cause = "device_lost";
  BerthView berth = ended_berth(outcome);
  const BerthView lost = lost_berth(1);
  berth.nest = lost.nest, berth.trouble = lost.trouble;
  const BerthContent content = berth_content(berth, nullptr);
  EXPECT_EQ(content.headline, "Not ready");
  EXPECT_EQ(content.note, "last: Void");
  EXPECT_EQ(content.serial, "AQ20-048-00137");
  EXPECT_EQ(content.to_do, "Take the probe out; nothing was decided about it.");
  EXPECT_TRUE(content.why.contains("does not answer")) << content.why.toStdString();
}

}  // namespace
}  // namespace probewright::windows
