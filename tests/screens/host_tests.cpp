#include <gtest/gtest.h>

#include <QApplication>
#include <QTest>
#include <filesystem>
#include <iostream>

#include "drivers/emulated/bench_thread.h"
#include "station/sequence/line_host.h"
#include "station/windows/frame/main_window.h"
#include "station/windows/frame/settings.h"
#include "station/windows/host_door.h"
#include "station/windows/line/berth_grid.h"
#include "station/windows/line/line_model.h"
#include "station/windows/line/line_page.h"
#include "station/windows/line/scan_field.h"
#include "station/windows/line_feed.h"
#include "station/windows/look/label.h"
#include "station/windows/look/system_scheme.h"
#include "station/windows/watchdog.h"
#include "station/windows/words/languages.h"
#include "tests/trial/trial.h"

namespace probewright::windows {
namespace {

constexpr double speed = 3.0;  // slow enough for a machine that builds meanwhile
constexpr int patience_ms = 60'000;

/// The window over the real line in its own thread, its ledger on disk, and an emulated bench behind pseudo-terminals.
class RealLine : public testing::Test {
 protected:
  void SetUp() override {
    std::string name = (std::filesystem::temp_directory_path() / "pw-window-XXXXXX").string();
    ASSERT_NE(mkdtemp(name.data()), nullptr);
    folder = name;
    emulated::RunBenchOptions options;
    options.bench.nests = 1;
    options.bench.speed = speed;
    options.folder = (folder / "ports").string();
    bench = emulated::BenchThread::start(options).value();
    sequence::Configuration configuration = trial::demonstration();
    configuration.station.value.speed = speed;
    configuration.station.value.nests.resize(1);
    sequence::LineHostOptions host_options;
    host_options.ledger = (folder / "ledger.db").string();
    host_options.ports = (folder / "ports").string();
    host_options.software = {"0.0.0-test", "test", "test"};
    host = sequence::LineHost::start(std::move(configuration), host_options, feed.listener()).value();
    door = std::make_unique<HostDoor>(*host);
    model = std::make_unique<LineModel>(*door);
    settings = std::make_unique<Settings>(QString::fromStdString((folder / "windows.ini").string()));
    window = std::make_unique<MainWindow>(WindowParts{*model, look, languages, *settings, "0.0.0-test"});
    pump = std::make_unique<Pump>(&feed, *model);
    window->show();
  }
  void TearDown() override {
    pump.reset();
    window.reset();
    model.reset();
    host->finish("Imre Vasko");
    host.reset();
    bench.reset();
    std::filesystem::remove_all(folder);
  }
  void scan(const char* text) {
    QLineEdit* edit = window->line().scan_field().edit();
    QTest::keyClicks(edit, text);
    QTest::keyClick(edit, Qt::Key_Return);
  }
  bool comes(const std::function<bool()>& wanted) { return QTest::qWaitFor(wanted, patience_ms); }
  const BerthContent& berth() { return window->line().grid().berths().at(0)->content(); }
  QString answer() { return window->findChild<Label*>("answer")->text(); }

  std::filesystem::path folder;
  std::unique_ptr<emulated::BenchThread> bench;
  LineFeed feed;
  std::unique_ptr<sequence::LineHost> host;
  std::unique_ptr<HostDoor> door;
  std::unique_ptr<LineModel> model;
  std::unique_ptr<Settings> settings;
  Languages languages;
  SystemScheme scheme{false};
  Look look{scheme};
  std::unique_ptr<MainWindow> window;
  std::unique_ptr<Pump> pump;
};

TEST_F(RealLine, FromTheBadgeToTheVerdictByKeysAlone) {
  auto& application = dynamic_cast<WatchedApplication&>(*QCoreApplication::instance());
  const int slow_before = application.slow_calls();
  ASSERT_TRUE(comes([&] { return berth().headline == "Empty"; })) << berth().to_do.toStdString();
  scan("AQ20-048-00001");
  ASSERT_TRUE(comes([&] { return answer() == "Nobody is signed in. Scan your badge."; })) << answer().toStdString();
  scan("AQS-7Q41-IV");
  ASSERT_TRUE(comes([&] { return answer() == "Imre Vasko, operator, is signed in."; })) << answer().toStdString();
  scan("LOT/AQ20-W48-07/AQ-20/48/AQ20-048-00001");
  ASSERT_TRUE(comes([&] { return answer() == "Lot AQ20-W48-07 is open: 48 of AQ-20."; })) << answer().toStdString();
  scan("AQ20-048-00001");
  ASSERT_TRUE(comes([&] { return berth().headline == "Put it in"; })) << answer().toStdString();
  ASSERT_TRUE(bench->with_hands([](emulated::Hands& hands) { return hands.seat(1, "AQ20-048-00001", "AQ-20"); }));
  ASSERT_TRUE(comes([&] { return berth().running; }));
  ASSERT_TRUE(comes([&] { return berth().headline == "Pass" || berth().headline == "Fail"; }))
      << berth().spoken().toStdString();
  EXPECT_EQ(berth().serial, "AQ20-048-00001");
  EXPECT_TRUE(berth().washed);
  EXPECT_GT(berth().points.size(), 20u);
  EXPECT_TRUE(berth().plots);
  QTest::keyClick(window->line().scan_field().edit(), Qt::Key_Return);
  const QString kept = qEnvironmentVariable("PW_KEEP_SCREENS");
  if (!kept.isEmpty()) window->grab().save(kept + "/real_readings.png");
  QTest::keyClick(window->line().scan_field().edit(), Qt::Key_Escape);
  QApplication::processEvents();
  if (!kept.isEmpty()) window->grab().save(kept + "/real_line.png");
  // How long a call takes on a machine that does other things as well proves nothing, so this is printed only.
  std::cout << application.slow_calls() - slow_before << " calls of the main thread took over "
            << WatchedApplication::longest_ms << " ms\n";
}

}  // namespace
}  // namespace probewright::windows
