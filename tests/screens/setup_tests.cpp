#include <gtest/gtest.h>

#include <QApplication>
#include <QPushButton>
#include <QSignalSpy>
#include <QSpinBox>
#include <QTest>
#include <atomic>

#include "stage.h"
#include "station/windows/line/play_strip.h"
#include "station/windows/look/label.h"
#include "station/windows/look/word_button.h"
#include "station/windows/setup/setup_page.h"

namespace probewright::windows {
namespace {

using sequence::DeviceKind;
using sequence::FoundDevice;

/// Two nests' devices, plugged in port by port, and one port with something else at it.
class FakeMachine : public SetupDoor {
 public:
  std::vector<std::string> ports() override { return there; }
  FoundDevice look_at(const std::string& port) override {
    const bool phantom = port.find("ph") != std::string::npos;
    if (!phantom && port.find("ad") == std::string::npos)
      return {port, {}, {}, {}, false, Problem{"port_unknown_device", port}};
    const std::string number = port.substr(port.size() - 1);
    return {port,
            phantom ? DeviceKind::phantom : DeviceKind::adapter,
            (phantom ? "PH-0" : "AD-0") + number,
            (phantom ? "PHC-2026-010" : "ADC-2026-010") + number,
            false,
            {}};
  }
  Result<std::string> keep(const std::vector<sequence::NestPlace>& nests) override {
    kept = nests;
    return std::string{"/etc/probewright/stations/quay-1.yaml"};
  }
  std::vector<std::string> there;
  std::vector<sequence::NestPlace> kept;
};

TEST(Pairing, GivesEachDeviceTheLowestNestThatLacksIt) {
  const FoundDevice phantom{"p", DeviceKind::phantom, "PH-01", "c", false, {}};
  const FoundDevice adapter{"a", DeviceKind::adapter, "AD-01", "c", false, {}};
  EXPECT_EQ(free_nest({}, phantom), 1);
  EXPECT_EQ(free_nest({{phantom, 1}}, phantom), 2);
  EXPECT_EQ(free_nest({{phantom, 1}}, adapter), 1);
  EXPECT_EQ(free_nest({}, FoundDevice{}), 0);
  EXPECT_EQ(nests_of({}).error().id, "setup_no_device");
  EXPECT_EQ(nests_of({{phantom, 1}}).error().id, "setup_nest_incomplete");
  EXPECT_EQ(nests_of({{phantom, 1}, {adapter, 1}, {adapter, 1}}).error().id, "setup_nest_incomplete");
  ASSERT_TRUE(nests_of({{phantom, 3}, {adapter, 3}}));
  EXPECT_EQ(nests_of({{phantom, 3}, {adapter, 3}})->front().nest, 3);
}

TEST(Setup, FindsDevicesNestByNestAndKeepsThem) {
  FakeMachine machine;
  SystemScheme scheme{false};
  Look look{scheme};
  look.set_scheme(Scheme::light);
  SetupPage page{machine, look};
  page.resize(1000, 700);
  page.show();
  auto* keep = page.findChild<QPushButton*>("keep");
  auto* state = page.findChild<Label*>("setup_state");
  EXPECT_FALSE(keep->isEnabled());
  EXPECT_TRUE(state->text().startsWith("No device was found.")) << state->text().toStdString();
  machine.there = {"/dev/ad1", "/dev/other", "/dev/ph1"};
  EXPECT_TRUE(QTest::qWaitFor([&] { return page.findChildren<QSpinBox*>().size() == 2; }, 5000));
  EXPECT_TRUE(QTest::qWaitFor([&] { return state->text() == "1 nest is complete."; }, 5000))
      << state->text().toStdString();
  machine.there.insert(machine.there.end(), {"/dev/ph2", "/dev/ad2"});
  EXPECT_TRUE(QTest::qWaitFor([&] { return state->text() == "2 nests are complete."; }, 5000))
      << state->text().toStdString();
  QApplication::processEvents();
  const QString kept_in = qEnvironmentVariable("PW_KEEP_SCREENS");
  if (!kept_in.isEmpty()) page.grab().save(kept_in + "/setup.png");
  QSignalSpy kept{&page, &SetupPage::kept};
  QTest::mouseClick(keep, Qt::LeftButton);
  ASSERT_EQ(kept.size(), 1);
  ASSERT_EQ(machine.kept.size(), 2u);
  EXPECT_EQ(machine.kept[1].phantom.port, "/dev/ph2");
  EXPECT_EQ(machine.kept[1].adapter.certificate, "ADC-2026-0102");
  machine.there.pop_back();  // a device is taken away again
  EXPECT_TRUE(QTest::qWaitFor([&] { return !keep->isEnabled(); }, 5000));
}

TEST(Setup, OffersTheEmulatedBench) {
  FakeMachine machine;
  SystemScheme scheme{false};
  Look look{scheme};
  SetupPage page{machine, look};
  page.show();
  QSignalSpy wanted{&page, &SetupPage::emulated_wanted};
  QTest::mouseClick(page.findChild<QPushButton*>("emulated"), Qt::LeftButton);
  EXPECT_EQ(wanted.size(), 1);
}

/// A bench that notes what hands did.
class FakePlay : public BenchPlay {
 public:
  std::string badge() const override { return "AQS-7Q41-IV"; }
  std::string lot_card() const override { return "LOT/AQ20-W48-07/AQ-20/48/AQ20-048-00001"; }
  std::string next_serial() override { return "AQ20-048-00001"; }
  Result<void> seat(int nest, const std::string& serial) override {
    done.push_back("seat " + std::to_string(nest) + " " + serial);
    return {};
  }
  Result<void> take_out(int nest) override {
    done.push_back("take out " + std::to_string(nest));
    return Problem{"bench_nest_empty", "", {{"nest", std::to_string(nest)}}};
  }
  std::vector<std::string> done;
};

// A newcomer presses one key again and again, and sees a whole passage.
TEST(PlayStrip, LeadsThroughAPassage) {
  Scene scene = busy_scene(1);
  scene.view.person.reset();
  scene.view.lot.reset();
  scene.view.berths[0] = empty_berth(1);
  Stage stage{{scene.view, {}}};
  FakePlay play;
  stage.window->add_row(new PlayStrip(play, *stage.model, stage.look));
  QApplication::processEvents();
  const auto next = [&] { return stage.find<WordButton>("play_next").text(); };
  const auto press = [&] { QTest::keyClick(&stage.edit(), Qt::Key_F5); };
  const auto scanned = [&] { return std::get<sequence::Scan>(stage.line.requests.back()).text; };
  EXPECT_EQ(next(), "scan a badge");
  press();
  EXPECT_EQ(scanned(), play.badge());
  scene.view.person = sequence::SignedIn{"Imre Vasko", "operator"};
  stage.show(scene.view);
  EXPECT_EQ(next(), "scan the lot card");
  press();
  EXPECT_EQ(scanned(), play.lot_card());
  scene.view.lot = busy_scene(1).view.lot;
  stage.show(scene.view);
  EXPECT_EQ(next(), "scan the next probe");
  press();
  EXPECT_EQ(scanned(), "AQ20-048-00001");
  scene.view.berths[0] = armed_berth(1, "AQ20-048-00001", 19);
  stage.show(scene.view);
  EXPECT_EQ(next(), "put the probe into nest 1");
  stage.picture("play");
  press();
  EXPECT_EQ(play.done.back(), "seat 1 AQ20-048-00001");
  scene.view.berths[0] = running_berth(1, "AQ20-048-00001", 0.5, 1);
  stage.show(scene.view);
  EXPECT_EQ(next(), "wait for a verdict");
  scene.view.berths[0] = ended_berth(some_outcome(1, "AQ20-048-00001", 1.0, 1));
  stage.show(scene.view);
  EXPECT_EQ(next(), "take the probe out of nest 1");
  press();
  EXPECT_EQ(play.done.back(), "take out 1");
}

}  // namespace
}  // namespace probewright::windows
