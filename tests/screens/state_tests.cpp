#include <gtest/gtest.h>

#include <QTest>

#include "stage.h"
#include "station/windows/frame/sheet.h"
#include "station/windows/look/label.h"

// Each state in which an operator could stand before the window and not know how to go on: one clear sentence, and a
// way.
namespace probewright::windows {
namespace {

using namespace sequence;

QString reason(Stage& stage) { return stage.find<Label>("reason").text(); }
QString readiness(Stage& stage) { return stage.find<Label>("readiness").text(); }

TEST(States, NobodyIsSignedIn) {
  Scene scene = busy_scene(4);
  scene.view.person.reset();
  scene.view.lot.reset();
  scene.view.tally = {};
  for (int nest = 1; nest <= 4; ++nest) scene.view.berths[static_cast<std::size_t>(nest - 1)] = empty_berth(nest);
  Stage stage{{scene.view, {}}};
  EXPECT_EQ(stage.find<Label>("person").text(), "Nobody is signed in");
  EXPECT_EQ(stage.find<Label>("answer").text(), "Nobody is signed in. Scan your badge.");
  stage.picture("nobody");
  scene.view.person = SignedIn{"Imre Vasko", "operator"};
  stage.show(scene.view);
  EXPECT_EQ(stage.find<Label>("answer").text(), "No lot is open. Scan the lot card.");
  EXPECT_EQ(stage.find<Label>("person").text(), "Imre Vasko, operator");
}

TEST(States, ALostDevice) {
  Scene scene = busy_scene(4);
  scene.view.berths[1] = lost_berth(2);
  scene.view.trouble = scene.view.berths[1].trouble;
  Stage stage{scene};
  EXPECT_EQ(readiness(stage), "Not ready");
  EXPECT_EQ(
      reason(stage),
      "Phantom of nest 2: the device does not answer, tried 3 times; last: no answer in time. Check its cable and "
      "power; the station keeps looking for it.");
  stage.picture("lost_device");
  scene.view.trouble.reset();
  scene.view.berths[1] = empty_berth(2);
  stage.show(scene.view);
  EXPECT_EQ(readiness(stage), "Ready");
}

TEST(States, AFullDisk) {
  Scene scene = busy_scene(4);
  const Problem full{"ledger_full", "/var/lib/probewright/Quay-1/ledger.db", {{"reason", "disk full"}, {"code", "13"}}};
  scene.view.trouble = full;
  for (BerthView& berth : scene.view.berths) {
    berth.nest.state = NestState::not_ready;
    berth.trouble = full;
  }
  auto& last = scene.view.berths[2].last.emplace();
  last.serial = "AQ20-048-00139", last.recorded = false;
  last.what_to_do = "take the probe out and keep it apart: this run is not on record";
  Stage stage{scene};
  EXPECT_TRUE(reason(stage).contains("Free space on its disk, then start again")) << reason(stage).toStdString();
  stage.picture("full_disk");
}

TEST(States, ARestartAfterAKillTellsWhichProbeSitsWhere) {
  Stage stage{busy_scene(4),
              {},
              {{412, "AQ20-048-00137", RunVerdict::void_run, 1}, {413, "AQ20-048-00138", RunVerdict::fail, 2}}};
  Sheet& sheet = stage.find<Sheet>("sheet");
  ASSERT_TRUE(sheet.is_open());
  QStringList said;
  for (const Label* label : sheet.findChildren<Label*>()) said << label->text();
  EXPECT_TRUE(said.contains("Nest 1\nAQ20-048-00137")) << said.join("; ").toStdString();
  EXPECT_TRUE(said.contains("Nest 2\nAQ20-048-00138"));
  stage.picture("after_a_kill");
  QTest::keyClick(&stage.edit(), Qt::Key_Return);
  EXPECT_FALSE(sheet.is_open());
}

TEST(States, TheLineEndedByItself) {
  Stage stage{busy_scene(4)};
  stage.model->break_off("an exception");
  EXPECT_EQ(readiness(stage), "Stopped");
  EXPECT_EQ(reason(stage), "The line ended by a mistake of the program. Close the window and start it again.");
}

TEST(States, HelpAndAbout) {
  for (const bool dark : {false, true}) {
    Stage stage{busy_scene(4), {QSize{1280, 800}, dark, 100, "en"}};
    QTest::keyClick(&stage.edit(), Qt::Key_F1);
    EXPECT_EQ(stage.find<Sheet>("sheet").kind(), "help");
    stage.picture(dark ? "help_dark" : "help_light");
    QTest::keyClick(&stage.edit(), Qt::Key_F1);
    EXPECT_FALSE(stage.find<Sheet>("sheet").is_open());
    stage.window->show_about();
    stage.picture(dark ? "about_dark" : "about_light");
    QString all;
    for (const Label* label : stage.find<Sheet>("sheet").findChildren<Label*>()) all += label->text();
    EXPECT_TRUE(all.contains("ISO 80601-2-61"));
    EXPECT_TRUE(all.contains("probewright 0.1.0"));
  }
}

TEST(States, ReadingsInGermanAndLargeAndDark) {
  Stage stage{busy_scene(4), {QSize{1280, 800}, true, 150, "de"}};
  QTest::keyClick(&stage.edit(), Qt::Key_Right);
  QTest::keyClick(&stage.edit(), Qt::Key_Return);
  EXPECT_EQ(stage.find<Sheet>("sheet").accessibleName(), "AQ20-048-00138 in Nest 2: Schlecht");
  stage.picture("readings_dark_150_de");
}

}  // namespace
}  // namespace probewright::windows
