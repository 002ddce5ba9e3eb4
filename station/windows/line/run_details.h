#pragma once
#include <QWidget>

#include "station/sequence/line_types.h"

namespace probewright::windows {

class Look;

/// "AQ20-048-00138 in nest 2: Fail"
QString run_title(const sequence::RunOutcome& outcome);
/// The page of a run: what it was, why it ended so, all its readings.
QWidget* make_run_page(const sequence::RunOutcome& outcome, const Look& look);

}  // namespace probewright::windows
