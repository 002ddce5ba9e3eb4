#pragma once
#include <string>
#include <vector>

#include "station/pages/paper.h"
#include "station/pages/shift_report.h"

/// Plots of a report as blocks. Private to pages. Main thread only.
namespace probewright::pages {

/// Lying bars, one a check, in the given order, each with its number. At least one check.
Block bar_plot(const std::vector<FailingCheck>& checks);

/// The values against the number of the run, with the limits as lines, and beside it how often which values came.
/// Values outside are crosses, not points. At least one value that is a number.
Block chart_with_histogram(const RunChart& chart);

/// Runs by hour or day as standing bars of passed, failed and void runs, up to 24 in a row. At least one.
std::vector<Block> stretch_plots(const std::vector<StretchRow>& stretches);

}  // namespace probewright::pages
