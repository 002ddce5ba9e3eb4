#include "station/text/label_files.h"

#include <system_error>
#include <utility>

namespace probewright::text {
namespace fs = std::filesystem;

std::string file_part(std::string_view text) {
  std::string part{text};
  for (char& c : part) {
    const bool plain = (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9');
    if (!plain && c != '-' && c != '_' && c != '.') c = '_';
  }
  if (part.starts_with('.')) part.front() = '_';
  return part.substr(0, 100);
}

DrawnLabel::DrawnLabel(const sequence::LabelFacts& facts, const fs::path& folder) : facts_(facts) {
  std::string name = file_part(facts.serial) + "-" + std::string{slug(facts.kind)};
  if (facts.copy > 1) name += "-copy" + std::to_string(facts.copy);
  pdf_ = folder / (name + ".pdf");
  png_ = folder / (name + ".png");
  hidden_pdf_ = folder / ("." + name + ".pdf.part");
  hidden_png_ = folder / ("." + name + ".png.part");
}

DrawnLabel::DrawnLabel(DrawnLabel&& other) noexcept
    : facts_(std::move(other.facts_)),
      pdf_(std::move(other.pdf_)),
      png_(std::move(other.png_)),
      hidden_pdf_(std::exchange(other.hidden_pdf_, {})),
      hidden_png_(std::exchange(other.hidden_png_, {})),
      code_(std::move(other.code_)) {}

DrawnLabel::~DrawnLabel() {
  std::error_code ignored;
  for (const fs::path& file : {hidden_pdf_, hidden_png_})
    if (!file.empty()) fs::remove(file, ignored);
}

Result<DrawnLabel> DrawnLabel::draw(PageMaker& pages, const sequence::LabelFacts& facts, const LabelForm& form,
                                    UtcTime printed, const fs::path& folder) {
  std::error_code error;
  fs::create_directories(folder, error);
  if (error) return Problem{"folder_not_made", folder.string(), {{"reason", error.message()}}};
  DrawnLabel label{facts, folder};
  auto code = pages.label(facts, form, printed, label.hidden_pdf_, label.hidden_png_);
  if (!code) return code.error();
  label.code_ = *std::move(code);
  return label;
}

sequence::LabelEntry DrawnLabel::entry(std::string who, std::string reason) const {
  return {{facts_.run}, facts_.kind, facts_.copy, code_, std::move(reason), std::move(who)};
}

Result<void> DrawnLabel::put_in_place() {
  for (auto* file : {&hidden_pdf_, &hidden_png_}) {
    const fs::path& place = file == &hidden_pdf_ ? pdf_ : png_;
    std::error_code error;
    fs::rename(*file, place, error);
    if (error) return Problem{"page_not_written", place.string(), {{"reason", error.message()}}};
    file->clear();
  }
  return {};
}

}  // namespace probewright::text
