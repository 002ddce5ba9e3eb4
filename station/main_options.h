#pragma once
#include <string>
#include <variant>

#include "drivers/emulated/run_bench.h"
#include "station/base/result.h"
#include "station/text/checkup.h"
#include "station/text/choices.h"
#include "station/text/demo.h"
#include "station/text/label.h"
#include "station/text/ledger.h"
#include "station/text/limits.h"
#include "station/text/line.h"
#include "station/text/measure.h"
#include "station/text/recording.h"
#include "station/text/rederive.h"
#include "station/text/replay.h"
#include "station/text/report.h"
#include "station/text/simulate.h"
#include "station/text/test.h"
#include "station/text/trace.h"

namespace probewright {

/// Text that is the whole answer: help, overview, version.
struct ShowText {
  std::string text;
};

/// What was asked for: one type for each command.
using Request =
    std::variant<ShowText, emulated::RunBenchOptions, text::DemoOptions, text::LineOptions, text::TestOptions,
                 text::CheckupOptions, text::TraceOptions, text::LedgerVerifyOptions, text::LedgerSealOptions,
                 text::LedgerBackupOptions, text::LedgerRestoreOptions, text::LedgerCloseVolumeOptions,
                 text::LedgerPruneOptions, text::LedgerExportOptions, text::RederiveOptions, text::ImpactOptions,
                 text::LimitsCheckOptions, text::LimitsDiffOptions, text::MeasureSpectrumOptions,
                 text::MeasurePulsesOptions, text::ReportRunOptions, text::ReportSerialOptions,
                 text::ReportShiftOptions, text::LabelOptions, text::ReplayOptions, text::RecordingShowOptions,
                 text::RecordingCutOptions, text::SimulateOptions>;

struct CommandLine {
  bool json = false;
  Request request;
};

/// Whether --json stands anywhere, known even when the rest cannot be read.
bool wants_json(int argc, const char* const* argv);

/// Reads what was typed. `build` goes into --version and into runs; `installed` is the last place for a configuration.
/// Errors: usage_... of the problem table, each with the command to ask for help.
Result<CommandLine> read_command_line(int argc, const char* const* argv, const text::Build& build,
                                      const std::filesystem::path& installed);

}  // namespace probewright
