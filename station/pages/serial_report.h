#pragma once
#include <filesystem>

#include "station/base/result.h"
#include "station/trace/history.h"
#include "station/trace/page_notes.h"

namespace probewright::pages {

/// Writes the life of one serial as A4 pages and returns how many: its runs drawn over time and as a table, what
/// failed, the readings of its newest runs side by side, labels and other entries, seal, cautions. Where any run is
/// emulated every page says DEMONSTRATION. An older file is replaced whole. Main thread only. Errors:
/// page_no_application, page_no_font, page_not_finished, page_not_written.
Result<int> write_serial_report(const trace::History& history, const trace::PageNotes& notes,
                                const std::filesystem::path& path);

}  // namespace probewright::pages
