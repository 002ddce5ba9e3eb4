#include "station/main_pages.h"

#include <optional>

#include "station/pages/drawing_room.h"
#include "station/pages/label.h"
#include "station/pages/run_report.h"
#include "station/pages/serial_report.h"
#include "station/pages/shift_page.h"

namespace probewright {
namespace {

Result<pages::Label> label_of(const sequence::LabelFacts& facts, const text::LabelForm& form, UtcTime printed) {
  const pages::LabelRun run{facts.verdict, facts.purpose, facts.emulated};
  const pages::LabelSize size{form.width_mm, form.height_mm};
  if (facts.kind == sequence::LabelKind::fail)
    return pages::Label::of(pages::FailLabel{run, facts.internal_code, facts.copy, printed}, size);
  return pages::Label::of(pages::PassLabel{run, facts.model, facts.serial, facts.lot, facts.production_date, facts.gtin,
                                           facts.copy, printed},
                          size);
}

class DrawnPages final : public text::PageMaker {
 public:
  Result<int> run_report(const trace::RunStory& story, const trace::PageNotes& notes,
                         const std::filesystem::path& pdf) override {
    enter();
    return pages::write_run_report(story, notes, pdf);
  }
  Result<int> serial_report(const trace::History& history, const trace::PageNotes& notes,
                            const std::filesystem::path& pdf) override {
    enter();
    return pages::write_serial_report(history, notes, pdf);
  }
  Result<int> shift_report(const trace::ShiftFacts& facts, const trace::PageNotes& notes,
                           const std::filesystem::path& pdf) override {
    enter();
    return pages::write_shift_report(pages::shift_report_of(facts, notes), pdf);
  }
  Result<std::string> label(const sequence::LabelFacts& facts, const text::LabelForm& form, UtcTime printed,
                            const std::filesystem::path& pdf, const std::filesystem::path& png) override {
    enter();
    const auto label = label_of(facts, form, printed);
    if (!label) return label.error();
    if (const auto written = label->write_pdf(pdf); !written) return written.error();
    if (const auto written = label->write_png(png, form.dots_per_inch); !written) return written.error();
    return label->coded();
  }

 private:
  void enter() {
    if (!room_) room_.emplace();
  }
  std::optional<pages::DrawingRoom> room_;
};

}  // namespace

std::unique_ptr<text::PageMaker> page_maker() { return std::make_unique<DrawnPages>(); }

}  // namespace probewright
