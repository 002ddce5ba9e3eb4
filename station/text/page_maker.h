#pragma once
#include <filesystem>
#include <string>

#include "station/base/result.h"
#include "station/base/times.h"
#include "station/sequence/labels.h"
#include "station/trace/history.h"
#include "station/trace/page_notes.h"
#include "station/trace/run_story.h"
#include "station/trace/shift.h"

namespace probewright::text {

struct LabelForm {
  double width_mm = 40.0, height_mm = 20.0;
  int dots_per_inch = 300;  ///< of the picture
};

/// Draws pages for commands: made by main, since nothing else here knows the tool kit. Main thread only.
/// Reports are written as PDF, an older file is replaced whole; the number of pages comes back.
class PageMaker {
 public:
  virtual ~PageMaker() = default;
  virtual Result<int> run_report(const trace::RunStory& story, const trace::PageNotes& notes,
                                 const std::filesystem::path& pdf) = 0;
  virtual Result<int> serial_report(const trace::History& history, const trace::PageNotes& notes,
                                    const std::filesystem::path& pdf) = 0;
  virtual Result<int> shift_report(const trace::ShiftFacts& facts, const trace::PageNotes& notes,
                                   const std::filesystem::path& pdf) = 0;
  /// Draws a label as PDF and PNG, and says what a reader gets from its code. `printed` stands in the file only.
  /// Errors: whatever keeps this run from a label (label_not_passed, label_gtin_not_example ...), or the text off it.
  virtual Result<std::string> label(const sequence::LabelFacts& facts, const LabelForm& form, UtcTime printed,
                                    const std::filesystem::path& pdf, const std::filesystem::path& png) = 0;
};

}  // namespace probewright::text
