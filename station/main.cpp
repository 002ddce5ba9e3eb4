#include <unistd.h>

#include <exception>
#include <filesystem>
#include <iostream>

#include "commit_stamp.h"
#include "station/main_demo.h"
#include "station/main_hands.h"
#include "station/main_options.h"
#include "station/main_pages.h"
#include "station/main_window.h"
#include "station/text/console.h"

// Wires things together and nothing else: what was asked for, where it prints, what it ends with.
namespace probewright {
namespace {

/// The configuration that came with the program: beside it where it was installed, in the sources where it was built.
std::filesystem::path installed_configuration() {
  std::error_code ignored;
  const auto program = std::filesystem::read_symlink("/proc/self/exe", ignored);
  const auto installed = program.parent_path().parent_path() / "share" / "probewright" / "configs";
  return std::filesystem::is_directory(installed, ignored) ? installed : std::filesystem::path{PW_SOURCE_CONFIGS};
}

struct Dispatch {
  text::Console& console;
  int operator()(const ShowText& shown) const {
    console.print_text(shown.text);
    return text::done;
  }
  int operator()(const emulated::RunBenchOptions& options) const {
    emulated::RunBenchOptions bench = options;
    if (!bench.scenario_file.empty()) {
      auto scenario = emulated::read_scenario_file(bench.scenario_file);
      if (!scenario) return console.refuse(scenario.error());
      bench.scenario = *std::move(scenario);
    }
    const auto ended = emulated::run_bench(bench, std::cout);
    return ended ? text::done : console.refuse(ended.error());
  }
  int operator()(const text::DemoOptions& options) const {
    if (const auto problem = text::impossible(options)) return console.refuse(*problem);
    const auto pages = page_maker();
    text::DemoParts parts = demo_parts(options);
    parts.pages = pages.get();
    const auto window = options.headless ? nullptr : line_window(options.build.version);
    parts.window = window.get();
    return text::demo(options, parts, console);
  }
  int operator()(const text::LineOptions& options) const {
    const auto hands = bench_hands(options);
    const auto window = options.text ? nullptr : line_window(options.build.version);
    return text::line(options, hands ? &*hands : nullptr, window.get(), console);
  }
  int operator()(const text::TestOptions& options) const {
    const auto hands = bench_hands(options);
    return text::test(options, hands ? &*hands : nullptr, console);
  }
  int operator()(const text::CheckupOptions& options) const { return text::checkup(options, console); }
  int operator()(const text::TraceOptions& options) const { return text::trace(options, console); }
  int operator()(const text::ReportRunOptions& options) const {
    return text::report_run(options, page_maker().get(), console);
  }
  int operator()(const text::ReportSerialOptions& options) const {
    return text::report_serial(options, page_maker().get(), console);
  }
  int operator()(const text::ReportShiftOptions& options) const {
    return text::report_shift(options, page_maker().get(), console);
  }
  int operator()(const text::LabelOptions& options) const { return text::label(options, page_maker().get(), console); }
  int operator()(const text::LedgerVerifyOptions& options) const { return text::ledger_verify(options, console); }
  int operator()(const text::LedgerSealOptions& options) const { return text::ledger_seal(options, console); }
  int operator()(const text::LedgerBackupOptions& options) const { return text::ledger_backup(options, console); }
  int operator()(const text::LedgerRestoreOptions& options) const { return text::ledger_restore(options, console); }
  int operator()(const text::LedgerCloseVolumeOptions& options) const {
    return text::ledger_close_volume(options, console);
  }
  int operator()(const text::LedgerPruneOptions& options) const { return text::ledger_prune(options, console); }
  int operator()(const text::LedgerExportOptions& options) const { return text::ledger_export(options, console); }
  int operator()(const text::RederiveOptions& options) const { return text::rederive(options, console); }
  int operator()(const text::ImpactOptions& options) const { return text::impact(options, console); }
  int operator()(const text::LimitsCheckOptions& options) const { return text::limits_check(options, console); }
  int operator()(const text::LimitsDiffOptions& options) const { return text::limits_diff(options, console); }
  int operator()(const text::SimulateOptions& options) const { return text::simulate(options, console); }
  int operator()(const text::MeasureSpectrumOptions& options) const { return text::measure_spectrum(options, console); }
  int operator()(const text::ReplayOptions& options) const { return text::replay(options, console); }
  int operator()(const text::RecordingShowOptions& options) const { return text::recording_show(options, console); }
  int operator()(const text::RecordingCutOptions& options) const { return text::recording_cut(options, console); }
  int operator()(const text::MeasurePulsesOptions& options) const { return text::measure_pulses(options, console); }
};

int run(int argc, const char* const* argv, text::Console& console) {
  const text::Build build{PW_VERSION, PW_COMMIT, PW_COMPILER};
  const auto line = read_command_line(argc, argv, build, installed_configuration());
  if (!line) return console.refuse(line.error());
  return std::visit(Dispatch{console}, line->request);
}

/// Whatever comes up here was not expected by any command; it is told and nothing is hidden.
int run_guarded(int argc, const char* const* argv, text::Console& console) {
  try {
    return run(argc, argv, console);
  } catch (const ProblemError& error) {
    return console.refuse(error.problem());
  } catch (const std::exception& error) {
    return console.refuse(Problem{"text_unexpected", "probewright", {{"reason", error.what()}}});
  }
}

}  // namespace
}  // namespace probewright

int main(int argc, char** argv) {
  using namespace probewright;
  std::ios::sync_with_stdio(false);
  text::Console console{
      std::cout, std::cerr, {wants_json(argc, argv), isatty(STDOUT_FILENO) == 1, isatty(STDERR_FILENO) == 1}};
  const int status = run_guarded(argc, argv, console);
  std::cout.flush();
  if (std::cout) return status;
  std::cerr << Problem{"text_output_lost", "standard output"}.text() << '\n';
  return text::could_not;
}
