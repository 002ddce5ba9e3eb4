#pragma once
#include <filesystem>

#include "station/base/result.h"
#include "station/trace/page_notes.h"
#include "station/trace/run_story.h"

namespace probewright::pages {

/// Writes a run as A4 pages and returns how many: verdict, what it stood on, margin rails, plots of its captures, all
/// readings, labels, seal, cautions. Output of an emulated bench says DEMONSTRATION on every page, output of another
/// purpose than production that purpose. An older file is replaced whole. Main thread only.
/// Errors: page_no_application, page_no_font, page_not_finished, page_not_written.
Result<int> write_run_report(const trace::RunStory& story, const trace::PageNotes& notes,
                             const std::filesystem::path& path);

}  // namespace probewright::pages
