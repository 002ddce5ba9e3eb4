#include "station/main_demo.h"

#include "drivers/emulated/action_log.h"
#include "drivers/emulated/bench_thread.h"
#include "drivers/emulated/demo_lot.h"

namespace probewright {
namespace {

using sequence::production::Piece;
using sequence::production::ProbeHandler;

constexpr const char* model = "AQ-20";
constexpr const char* lot_name = "AQ20-W48-07";
constexpr int lot_number = 48;
constexpr const char* operator_badge = "AQS-7Q41-IV";  // Imre Vasko, in configs/people

/// Hands at a bench that runs in this program.
class HandsAtBench final : public ProbeHandler {
 public:
  explicit HandsAtBench(std::unique_ptr<emulated::BenchThread> bench) : bench_(std::move(bench)) {}

  Result<void> seat(int nest, const Piece& piece) override {
    const auto fault = emulated::parse_fault(piece.fault);
    return bench_->with_hands([&](emulated::Hands& hands) {
      if (!fault) return hands.seat(nest, piece.serial, piece.model);
      return hands.seat(nest, piece.serial, piece.model, emulated::PlantedFault{*fault, piece.severity});
    });
  }
  Result<void> remove(int nest) override {
    return bench_->with_hands([&](emulated::Hands& hands) { return hands.remove(nest); });
  }
  Result<void> lid(int nest, bool open) override {
    return bench_->with_hands([&](emulated::Hands& hands) { return hands.lid(nest, open); });
  }

 private:
  std::unique_ptr<emulated::BenchThread> bench_;
};

Piece piece_of(const emulated::LotPiece& piece) {
  Piece made{piece.serial, piece.model, {}, 1.0};
  if (!piece.fault) return made;
  made.fault = slug_of(piece.fault->fault);
  made.severity = piece.fault->severity;
  return made;
}

/// Ports and certificates as the bench has them (drivers/emulated/README.md).
sequence::NestPlace place_of(int nest) {
  const std::string number = std::to_string(nest), digits = (nest < 10 ? "0" : "") + number;
  return {nest,
          {"nest" + number + "-phantom", "PHC-2026-01" + digits},
          {"nest" + number + "-adapter", "ADC-2026-01" + digits}};
}

/// The device floor of a run that went through at once: what the bench tells of its work, by the steps of the routine.
std::optional<double> floor_of(const sequence::RunOutcome& run, emulated::ActionLog& log) {
  if (run.asked_again > 0 || run.verdict == sequence::RunVerdict::void_run || run.steps.empty()) return std::nullopt;
  std::vector<double> busy_s;
  for (const sequence::RunStep& step : run.steps) {
    const auto kind = step.on_adapter ? emulated::DeviceKind::adapter : emulated::DeviceKind::phantom;
    busy_s.push_back(log.busy_s({run.nest, kind}, step.from, step.to));
  }
  log.forget(run.nest, run.steps.back().to);
  return sequence::device_floor_s(run.steps, busy_s);
}

}  // namespace

text::DemoParts demo_parts(const text::DemoOptions& options) {
  text::DemoParts parts;
  const auto lot = emulated::demo_lot(model, lot_number, options.probes, options.seed);
  for (const auto& piece : lot) parts.lot.push_back(piece_of(piece));
  for (int nest = 1; nest <= options.nests; ++nest) parts.nests.push_back(place_of(nest));
  parts.lot_name = lot_name;
  parts.lot_card =
      std::string{"LOT/"} + lot_name + "/" + model + "/" + std::to_string(lot.size()) + "/" + lot.front().serial;
  parts.badge = operator_badge;
  parts.truth = emulated::truth_json(options.seed, emulated::truths_of(lot, options.seed));
  const auto log = std::make_shared<emulated::ActionLog>();  // outlives the bench, which tells it what it does
  parts.device_floor_s = [log](const sequence::RunOutcome& run) { return floor_of(run, *log); };
  parts.start_bench = [&options, log](const std::string& ports) -> Result<std::unique_ptr<ProbeHandler>> {
    emulated::RunBenchOptions bench;
    bench.bench.nests = options.nests;
    bench.bench.speed = options.speed;
    bench.bench.seed = options.seed;
    bench.folder = ports;
    auto started = emulated::BenchThread::start(std::move(bench), log.get());
    if (!started) return started.error();
    return std::unique_ptr<ProbeHandler>{std::make_unique<HandsAtBench>(*std::move(started))};
  };
  return parts;
}

}  // namespace probewright
