#pragma once
#include <filesystem>
#include <optional>
#include <string>

#include "station/base/result.h"
#include "station/text/page_maker.h"

namespace probewright::text {

/// A label that is drawn, but does not count yet: its files lie beside their places under hidden names until the ledger
/// has its entry, and go away with this object otherwise. The order is: draw, entry (sequence::make_label_entry),
/// put_in_place.
class DrawnLabel {
 public:
  /// Draws into `folder`, which is made where it is missing: SERIAL-pass.pdf and .png, of a reprint
  /// SERIAL-pass-copy2.pdf. Main thread. Errors: those of PageMaker::label; folder_not_made.
  static Result<DrawnLabel> draw(PageMaker& pages, const sequence::LabelFacts& facts, const LabelForm& form,
                                 UtcTime printed, const std::filesystem::path& folder);
  ~DrawnLabel();
  DrawnLabel(DrawnLabel&& other) noexcept;
  DrawnLabel& operator=(DrawnLabel&&) = delete;

  /// What the ledger is to be told of it.
  sequence::LabelEntry entry(std::string who, std::string reason) const;
  /// After the entry is on disk. Errors: page_not_written.
  Result<void> put_in_place();

  const std::filesystem::path& pdf() const { return pdf_; }
  const std::filesystem::path& png() const { return png_; }
  /// What a reader gets from its code.
  const std::string& code() const { return code_; }

 private:
  DrawnLabel(const sequence::LabelFacts& facts, const std::filesystem::path& folder);
  sequence::LabelFacts facts_;
  std::filesystem::path pdf_, png_, hidden_pdf_, hidden_png_;
  std::string code_;
};

/// "AQ20-048-00137" as a part of a file's name: what is no letter, digit, '-', '_' or '.' becomes '_'.
std::string file_part(std::string_view text);

}  // namespace probewright::text
