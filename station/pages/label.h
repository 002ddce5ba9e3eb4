#pragma once
#include <filesystem>
#include <string>

#include "station/base/result.h"
#include "station/base/times.h"
#include "station/pages/barcode.h"

namespace probewright::pages {

struct LabelSize {
  double width_mm = 40.0;
  double height_mm = 20.0;
};

/// What of a run decides whether it may have a label. Words as the ledger has them; one that is none of them is
/// refused.
struct LabelRun {
  std::string verdict;  ///< pass, fail, void
  std::string purpose;  ///< production, engineering, reference, challenge, gauge, echo, training, return
  bool emulated = false;
};

struct PassLabel {
  LabelRun run;
  std::string model;            ///< "AQ-20"
  std::string serial;           ///< 1 to 20 characters
  std::string lot;              ///< 1 to 20 characters
  std::string production_date;  ///< in the plant's zone, "2026-12-01"
  std::string gtin;             ///< GTIN-8, 12, 13 or 14 of the model; empty: it has none
  int copy = 1;                 ///< 2 and more: a reprint, and the label says so
  UtcTime printed{};            ///< when; stands in the file, not on the label
};

struct FailLabel {
  LabelRun run;
  std::string internal_code;  ///< the plant's own, 1 to 20 characters; nothing that a till could take for a GTIN
  int copy = 1;
  UtcTime printed{};
};

/// A label that may be made: checked, encoded, ready to be drawn. There is no other way to one.
///
/// A pass label carries a GS1 DataMatrix (AI 01, 11, 10, 21) where the model has a GTIN, else a Code 128 of the serial.
/// A fail label carries the word FAIL and a Code 128 of an internal code, no more. What was measured on an emulated
/// bench is overprinted DEMONSTRATION and takes only GTINs of the range that GS1 keeps for examples; a fail label of
/// another purpose is overprinted with that purpose.
/// Checked on any thread; drawn on the main thread, with an application (drawing_room.h).
class Label {
 public:
  /// Errors: label_not_passed, label_not_production, label_copy, label_size, label_text, label_gtin_not_example, those
  /// of gs1.h and barcode.h.
  static Result<Label> of(const PassLabel& wanted, LabelSize size = {});
  /// Errors: label_not_failed, label_purpose_unknown, label_copy, label_size, label_text, label_code_like_gtin,
  /// code_not_made.
  static Result<Label> of(const FailLabel& wanted, LabelSize size = {});

  /// What a reader gets from the code: the element string, the serial or the internal code.
  const std::string& coded() const { return coded_; }

  /// One page, exactly as large as the label, all vectors. An older file is replaced whole. The
  /// same label with the same tool kit gives the same bytes.
  /// Errors: page_no_application, page_no_font, label_too_small, page_not_finished, page_not_written.
  Result<void> write_pdf(const std::filesystem::path& path) const;
  /// Grey levels at the printer's own resolution (100 to 1200 dpi), each module a whole number of dots.
  /// Errors: as write_pdf; label_resolution.
  Result<void> write_png(const std::filesystem::path& path, int dots_per_inch) const;

 private:
  friend class LabelDrawing;
  enum class Kind { pass_with_gtin, pass_with_serial, fail };

  Label() = default;
  Kind kind_ = Kind::fail;
  LabelSize size_;
  Modules code_;
  std::string coded_;
  std::string overprint_;                                      ///< empty: none
  std::string model_, gtin_, serial_, lot_, production_date_;  ///< production_date_ as it is printed
  int copy_ = 1;
  UtcTime printed_;
};

}  // namespace probewright::pages
