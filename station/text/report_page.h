#pragma once
#include <functional>
#include <string>

#include "db/rows.h"
#include "station/text/report.h"

namespace probewright::text {

/// What pages of a ledger say of their making, now.
trace::PageNotes page_notes(const Zone& zone, const std::string& ledger, const db::Seal& seal);

/// The cautions without the line ends of a terminal: one paragraph a line.
std::string caution_paragraphs();

/// Writes the page of a report where one is wanted: to --out, else, unless the answer is JSON, to `name` in the current
/// folder. Returns what to say of it, "Report: run-12.pdf, 2 pages"; empty where none was wanted.
/// Errors: those of `draw`; pages_left_out.
Result<std::string> write_page(const ReportOptions& options, const std::string& name, PageMaker* pages,
                               const Console& console,
                               const std::function<Result<int>(PageMaker&, const std::string& pdf)>& draw);

}  // namespace probewright::text
