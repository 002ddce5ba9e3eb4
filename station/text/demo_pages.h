#pragma once
#include "station/text/demo_summary.h"
#include "station/text/page_maker.h"

namespace probewright::text {

/// Labels of all serials of the demonstration whose last run has a verdict and no label yet, as `label` makes them,
/// with their entries in the ledger. Gives how many files of labels stand in the folder now. For a ledger that no line
/// holds. Errors: those of opening the ledger, of drawing, of the entries.
Result<int> make_demo_labels(PageMaker& pages, const DemoResult& result, const Build& build);

/// The shift report of everything in the ledger. Errors: those of opening it and of drawing.
Result<void> write_demo_report(PageMaker& pages, const DemoFolder& folder);

}  // namespace probewright::text
