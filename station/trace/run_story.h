#pragma once
#include <optional>
#include <string>
#include <vector>

#include "db/queries/labels.h"
#include "db/queries/run_record.h"
#include "db/reader.h"
#include "db/rows.h"
#include "station/base/result.h"

namespace probewright::trace {

/// A spectrum as it is drawn: dark frame subtracted, response removed where it could be; the window of its LED's line.
struct SpectrumPlot {
  std::string band;                   ///< "red", "infrared"
  std::vector<double> wavelength_nm;  ///< rising; by the phantom's certificate that the run used
  std::vector<double> power;          ///< over its highest value
  std::optional<double> centroid_nm;  ///< the run's own reading
};

/// Light of both LEDs at one set point, over its mean, in %: 0 is the mean.
struct PulsePlot {
  double set_point_ratio = 0.0;  ///< nominal R
  std::vector<double> red_s, red_percent, infrared_s, infrared_percent;
};

/// A run with what its stored captures show.
struct RunStory {
  db::RunRecord run;
  std::vector<SpectrumPlot> spectra;
  std::vector<PulsePlot> pulses;        ///< rising ratio
  std::vector<std::string> not_drawn;   ///< captures that show no plot though they should, and why, in words
  std::vector<db::LabelRecord> labels;  ///< of this run
  db::Seal seal;                        ///< of the ledger when it was read
};

/// The number of the run that an entry is of: its opening or closing entry, or a label's. Nothing for others.
std::optional<db::RunId> run_of_entry(db::Reader& reader, std::int64_t entry);

/// The run that an entry is of, with its captures decoded. A capture whose bytes were pruned or are damaged is named in
/// `not_drawn`; the rest is told all the same. Errors: entry_unknown, entry_of_no_run. Throws db::Error.
Result<RunStory> run_story(db::Reader& reader, std::int64_t entry);

}  // namespace probewright::trace
