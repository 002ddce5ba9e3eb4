#include "station/pages/finish.h"

#include <QByteArray>

#include "station/pages/drawing_room.h"
#include "station/pages/fact_blocks.h"
#include "station/pages/files_out.h"
#include "station/pages/pdf_bytes.h"

namespace probewright::pages {

Result<int> write_pages(const PageHead& head, const db::Seal& seal, const trace::PageNotes& notes,
                        const std::function<std::vector<Block>()>& blocks, const std::filesystem::path& path) {
  if (auto fault = not_drawable()) return *fault;
  Paper paper;
  paper.title = head.title;
  paper.foot = head.foot + ", entry " + std::to_string(seal.entry) + ", seal " + to_hex(seal.hash).substr(0, 16) +
               "..., printed " + minute_of(notes.zone.local_text(notes.printed));
  paper.overprint = head.overprint;
  paper.blocks = blocks();
  int pages = 0;
  QByteArray bytes = pdf_of(paper, pages);
  if (!set_creation_time(bytes, notes.printed)) return Problem{"page_not_finished", path.string()};
  const auto written = replace_file(path, bytes);
  if (written.has_error()) return written.error();
  return pages;
}

}  // namespace probewright::pages
