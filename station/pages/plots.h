#pragma once
#include <string>
#include <vector>

#include "station/pages/paper.h"
#include "station/pages/shift_report.h"

/// Plots of a report as blocks. Private to pages. Main thread only.
namespace probewright::pages {

/// Lying bars, one a check, in the given order, each with its number. At least one check.
Block bar_plot(const std::vector<FailingCheck>& checks);

/// The values against the number of the run, with the limits as lines. Values outside are crosses, not points. At least
/// one value that is a number.
Block run_chart(const RunChart& chart);

}  // namespace probewright::pages
