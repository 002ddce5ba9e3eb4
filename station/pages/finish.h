#pragma once
#include <filesystem>
#include <functional>
#include <string>
#include <vector>

#include "db/rows.h"
#include "station/base/result.h"
#include "station/pages/paper.h"
#include "station/trace/page_notes.h"

/// The last step of a report. Private to pages. Main thread only.
namespace probewright::pages {

struct PageHead {
  std::string title;      ///< of the file
  std::string foot;       ///< begin of each page's foot; entry, seal and time are added
  std::string overprint;  ///< empty: none
};

/// Makes the blocks, fills pages with them and writes the file. `blocks` is called only where pages can be drawn.
/// Errors: page_no_application, page_no_font, page_not_finished, page_not_written.
Result<int> write_pages(const PageHead& head, const db::Seal& seal, const trace::PageNotes& notes,
                        const std::function<std::vector<Block>()>& blocks, const std::filesystem::path& path);

}  // namespace probewright::pages
