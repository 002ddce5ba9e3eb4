#include "station/text/report_page.h"

#include "station/base/cautions.h"
#include "station/base/clock.h"

namespace probewright::text {

std::string caution_paragraphs() {
  std::string text = cautions;
  for (std::size_t at = text.find('\n'); at != std::string::npos; at = text.find('\n', at + 1))
    if (at > 0 && text[at - 1] != '.') text[at] = ' ';
  return text;
}

trace::PageNotes page_notes(const Zone& zone, const std::string& ledger, const db::Seal& seal) {
  return {
      zone, SystemClock{}.utc_now(),
      "probewright ledger verify " + ledger + " --entry " + std::to_string(seal.entry) + " --seal " + to_hex(seal.hash),
      caution_paragraphs()};
}

Result<std::string> write_page(const ReportOptions& options, const std::string& name, PageMaker* pages,
                               const Console& console,
                               const std::function<Result<int>(PageMaker&, const std::string& pdf)>& draw) {
  if (options.out.empty() && console.json()) return std::string{};
  const std::string pdf = options.out.empty() ? name : options.out;
  if (pages == nullptr) return Problem{"pages_left_out", pdf};
  const auto written = draw(*pages, pdf);
  if (!written) return written.error();
  return "Report: " + pdf + (*written == 1 ? ", 1 page" : ", " + std::to_string(*written) + " pages");
}

}  // namespace probewright::text
