#include "station/text/demo.h"

#include <boost/asio/executor_work_guard.hpp>
#include <boost/asio/io_context.hpp>
#include <boost/asio/post.hpp>
#include <boost/asio/signal_set.hpp>
#include <csignal>
#include <filesystem>
#include <thread>

#include "db/queries/run_record.h"
#include "db/queries/seal.h"
#include "station/base/clock.h"
#include "station/sequence/line_host.h"
#include "station/text/berth_lines.h"
#include "station/text/demo_folder.h"
#include "station/text/demo_pages.h"
#include "station/text/demo_summary.h"
#include "station/text/live_block.h"

namespace probewright::text {
namespace {

namespace asio = boost::asio;
using namespace sequence;
using production::OperatorSettings;
using production::OperatorThread;
using production::ProbeHandler;

/// Between two drawings of the berths, real time.
constexpr auto draw_pause = std::chrono::milliseconds(100);
/// What one movement of the operator's hands takes: quick, and as much faster as the bench is.
constexpr double movement_s = 0.3;
constexpr const char* whose = "the person at the terminal";

/// One demonstration, from the start of the bench to the report. The main thread waits and draws; line, ledger, bench
/// and operator have threads of their own. In the order in which it may go.
class Demonstration {
 public:
  Demonstration(const DemoOptions& options, const DemoParts& parts, DemoFolder folder, Console& console)
      : options_(options), parts_(parts), console_(console), block_(console, LiveBlock::On::err) {
    result_.folder = std::move(folder);
  }

  int run() {
    auto configuration = read_configuration(result_.folder.configs(), "");
    if (!configuration) return console_.refuse(configuration.error());
    auto handler = parts_.start_bench(result_.folder.ports());
    if (!handler) return console_.refuse(handler.error());
    handler_ = std::move(*handler);
    const SteadyTime begin = clock_.steady_now();
    if (auto started = start(std::move(*configuration)); !started) return console_.refuse(started.error());
    if (parts_.window)
      wait_in_window();
    else
      wait();
    finish();
    result_.took = clock_.steady_now() - begin;
    return tell();
  }

 private:
  Result<void> start(Configuration configuration) {
    OperatorSettings settings;
    settings.badge = parts_.badge;
    settings.lot_card = parts_.lot_card;
    settings.movement = from_seconds(movement_s / options_.speed);
    settings.mistakes = {options_.mistakes, options_.seed, {}};
    operator_ = std::make_unique<OperatorThread>(
        *handler_, [this](LineRequest request) { host_->request(std::move(request)); },
        [this] { asio::post(io_, [this] { operator_ended_ = true; }); }, settings, parts_.lot);
    LineHostOptions host;
    host.ledger = result_.folder.ledger();
    host.software = {options_.build.version, options_.build.commit, options_.build.compiler};
    host.views_per_s = block_.live() ? 10.0 : 0.0;
    LineHost::Listener listener;
    listener.event = [this](const LineEvent& event) {
      operator_->hear(event);
      asio::post(io_, [this, event] { hear(event); });
    };
    listener.broken = [this](const std::string& what) { asio::post(io_, [this, what] { broken_ = what; }); };
    if (parts_.window) {
      host.views_per_s = LineHostOptions{}.views_per_s;
      listener = both(std::move(listener), parts_.window->listener());
    }
    auto started = LineHost::start(std::move(configuration), host, std::move(listener));
    if (!started) return started.error();
    host_ = std::move(*started);
    for (const ClosedLate& run : host_->closed_late())
      say(Problem{"run_closed_late",
                  "entry " + std::to_string(run.run),
                  {{"serial", run.serial}, {"verdict", std::string{slug(run.verdict)}}}}
              .text());
    operator_->start();
    return {};
  }

  /// Until somebody closes the window. What is told goes to the terminal meanwhile, on a thread of its own: the window
  /// has the main one.
  void wait_in_window() {
    signals_.async_wait([this](const boost::system::error_code& error, int) {
      if (!error) parts_.window->close();
    });
    auto until_closed = asio::make_work_guard(io_);
    std::thread teller{[this] { io_.run(); }};
    parts_.window->open(*host_);
    asio::post(io_, [&] {
      signals_.cancel();
      until_closed.reset();
      result_.interrupted = !operator_ended_;
    });
    teller.join();
  }

  /// Until the operator is through, or somebody stops it.
  void wait() {
    signals_.async_wait([this](const boost::system::error_code& error, int) {
      if (!error) result_.interrupted = true;
    });
    while (!operator_ended_ && !result_.interrupted && broken_.empty()) {
      io_.run_for(draw_pause);
      draw();
    }
  }

  /// Ends everything in order: runs are closed on disk and LEDs off before the bench goes.
  void finish() {
    if (result_.interrupted) say("stopping: the runs that go on are closed first");
    operator_->stop();
    host_->finish(result_.interrupted ? whose : "the station");
    result_.work = operator_->wait();
    io_.restart();
    io_.poll();  // what was told last
    block_.remove();
    host_.reset();
    operator_.reset();
    handler_.reset();
    std::error_code ignored;
    std::filesystem::remove(result_.folder.ports(), ignored);
  }

  int tell() {
    for (const production::Attempt& attempt : result_.work.attempts)
      result_.runs.push_back({attempt.piece, attempt.outcome, {}, floors_[attempt.outcome.run]});
    if (!broken_.empty()) result_.work.trouble = broken_;
    make_pages();
    look_up();
    for (const Problem& problem : result_.troubles) console_.warn(problem);
    if (console_.json())
      console_.print_json(demo_json(result_, options_.speed));
    else
      console_.print_text(demo_text(options_, parts_, result_));
    const bool through = result_.work.trouble.empty() && !result_.interrupted;
    return through ? done : could_not;
  }

  void make_pages() {
    if (!parts_.pages) return;
    const auto made = make_demo_labels(*parts_.pages, result_, options_.build);
    if (made) result_.labels = *made;
    if (!made) result_.troubles.push_back(made.error());
    const auto written = write_demo_report(*parts_.pages, result_.folder);
    result_.report = written.has_value();
    if (!written) result_.troubles.push_back(written.error());
  }

  /// What only the ledger knows: its seal, and the likely causes of the fails.
  void look_up() {
    auto reader = db::Reader::open(result_.folder.ledger());
    if (!reader) {
      result_.troubles.push_back(reader.error());
      return;
    }
    const db::Seal seal = db::newest_seal(*reader);
    result_.seal_entry = seal.entry;
    result_.seal = to_hex(seal.hash);
    for (DemoRun& run : result_.runs) {
      const auto record = db::run_record(*reader, db::RunId{run.outcome.run});
      if (record && record->closing) run.likely_cause = record->closing->bench.text("likely_cause_words");
    }
  }

  void hear(const LineEvent& event) {
    if (const auto* ended = std::get_if<RunEnded>(&event)) {
      const RunOutcome& outcome = ended->outcome;
      if (parts_.device_floor_s) floors_[outcome.run] = parts_.device_floor_s(outcome);
      say(run_line(outcome, options_.speed));
    } else if (const auto* lost = std::get_if<RunNotRecorded>(&event)) {
      say("nest " + std::to_string(lost->nest) + ": " + lost->serial + ": " + lost->problem.text());
    } else if (const auto* ending = std::get_if<ArmingEnded>(&event)) {
      say("nest " + std::to_string(ending->nest) + ": " + ending->problem.text());
    } else if (const auto* answer = std::get_if<Answered>(&event); answer && !answer->taken) {
      say("scan: " + answer->words);
    }
  }

  void say(const std::string& words) {
    if (!console_.json()) block_.say(words);
  }

  void draw() {
    if (!block_.live()) return;
    const auto view = host_->view();
    std::vector<std::string> lines = head_lines(*view);
    for (const BerthView& berth : view->berths) lines.push_back(berth_line(berth));
    block_.draw(lines);
  }

  const DemoOptions& options_;
  const DemoParts& parts_;
  Console& console_;
  LiveBlock block_;
  SystemClock clock_;
  asio::io_context io_{1};
  asio::signal_set signals_{io_, SIGINT, SIGTERM, SIGHUP};  ///< to the end: a second Ctrl-C does not cut the end short
  DemoResult result_;
  std::map<std::int64_t, std::optional<double>> floors_;  ///< by run
  bool operator_ended_ = false;
  std::string broken_;
  std::unique_ptr<ProbeHandler> handler_;
  std::unique_ptr<OperatorThread> operator_;
  std::unique_ptr<LineHost> host_;
};

}  // namespace

std::optional<Problem> impossible(const DemoOptions& options) {
  const auto outside = [](const char* option, const char* least, const char* most) {
    return Problem{"usage_out_of_range", option, {{"least", least}, {"most", most}}};
  };
  if (options.nests < 1 || options.nests > 16) return outside("--nests", "1", "16");
  if (options.probes < 1 || options.probes > 99999) return outside("--probes", "1", "99999");
  if (!(options.speed >= 0.1 && options.speed <= 1000.0)) return outside("--speed", "0.1", "1000");
  if (!(options.mistakes >= 0.0 && options.mistakes <= 1.0)) return outside("--mistakes", "0", "1");
  return std::nullopt;
}

int demo(const DemoOptions& options, const DemoParts& parts, Console& console) {
  if (auto problem = impossible(options)) return console.refuse(*problem);
  auto folder = make_demo_folder(options, parts, SystemClock{}.utc_now());
  if (!folder) return console.refuse(folder.error());
  return Demonstration{options, parts, *std::move(folder), console}.run();
}

}  // namespace probewright::text
