#include "station/pages/shift_report.h"

#include <QByteArray>
#include <algorithm>
#include <cmath>
#include <string_view>

#include "station/base/numbers.h"
#include "station/pages/drawing_room.h"
#include "station/pages/fact_blocks.h"
#include "station/pages/files_out.h"
#include "station/pages/pdf_bytes.h"
#include "station/pages/plots.h"
#include "station/pages/table_blocks.h"

namespace probewright::pages {
namespace {

constexpr std::size_t most_bars = 10;

std::string percent(int part, int whole) {
  return whole > 0 ? fixed(100.0 * part / whole, 1) + " %" : std::string{"none"};
}

std::string joined(const std::vector<std::string>& texts, std::string_view between, std::string_view if_empty) {
  std::string all;
  for (const std::string& text : texts) all.append(all.empty() ? "" : between).append(text);
  return all.empty() ? std::string{if_empty} : all;
}

// "2026-12-01 06:00" of "2026-12-01 06:00:00".
std::string to_the_minute(const ShiftReport& report, UtcTime time) { return minute_of(report.zone.local_text(time)); }

// The day is not said twice.
std::string from_to(const ShiftReport& report) {
  const std::string begin = to_the_minute(report, report.begin), end = to_the_minute(report, report.end);
  const bool same_day = begin.substr(0, 10) == end.substr(0, 10);
  return begin + " to " + (same_day ? end.substr(11) : end) + " (" + report.zone.name() + ")";
}

struct Tile {
  std::string number, words, more;
};

std::vector<Tile> tiles_of(const ShiftCounts& counts) {
  const int judged = counts.passed + counts.failed;
  const std::string of = judged > 0 ? "of " + std::to_string(judged) : "no verdict yet";
  return {{std::to_string(counts.tested), "tested", ""},
          {std::to_string(counts.passed_first_time), "passed first time", std::to_string(counts.passed) + " in all"},
          {std::to_string(counts.failed), "failed", ""},
          {std::to_string(counts.voided), "void", ""},
          {percent(counts.passed, judged), "yield", of},
          {percent(counts.passed_first_time, judged), "first-pass yield", of}};
}

Block tiles(const ShiftCounts& counts) {
  Block block;
  block.height_mm = 21.0;
  block.draw = [all = tiles_of(counts)](const Canvas& canvas, QRectF box) {
    const double step = box.width() / static_cast<double>(all.size());
    double x = box.x();
    for (const Tile& tile : all) {
      const double room = step - 2.0;
      canvas.line({x, box.y(), room, 9.0}, qt(tile.number), canvas.fitting_mm(qt(tile.number), Weight::bold, 6.4, room),
                  Weight::bold, Align::left, ink::text);
      canvas.line({x, box.y() + 9.5, room, 4.0}, qt(tile.words),
                  canvas.fitting_mm(qt(tile.words), Weight::plain, 2.9, room), Weight::plain, Align::left, ink::quiet);
      canvas.line({x, box.y() + 13.5, room, 4.0}, qt(tile.more), 2.7, Weight::plain, Align::left, ink::quiet);
      x += step;
    }
  };
  return block;
}

std::vector<FailingCheck> commonest_first(std::vector<FailingCheck> checks) {
  std::stable_sort(checks.begin(), checks.end(),
                   [](const FailingCheck& a, const FailingCheck& b) { return a.runs > b.runs; });
  return checks;
}

std::vector<Block> failing(const ShiftReport& report) {
  std::vector<Block> blocks{heading("Failing checks")};
  if (report.failing_checks.empty()) {
    append(blocks, paragraph("No check failed in this shift.", body_size_mm, ink::text));
    return blocks;
  }
  const auto checks = commonest_first(report.failing_checks);
  const std::size_t bars = std::min(checks.size(), most_bars);
  blocks.push_back(bar_plot({checks.begin(), checks.begin() + static_cast<std::ptrdiff_t>(bars)}));
  if (bars < checks.size())
    append(blocks, paragraph("The " + std::to_string(bars) + " commonest of " + std::to_string(checks.size()) +
                                 " are drawn; the table has all.",
                             small_size_mm, ink::quiet));
  blocks.push_back(gap(3.0));
  std::vector<Cells> rows;
  for (const FailingCheck& check : checks)
    rows.push_back(
        {check.name, std::to_string(check.runs), check.likely_cause.empty() ? "not told" : check.likely_cause});
  append(blocks,
         table({{"check", 66.0, Align::left}, {"failed runs", 24.0, Align::right}, {"likely cause", 80.0, Align::left}},
               rows));
  return blocks;
}

std::vector<Block> charts(const ShiftReport& report) {
  std::vector<Block> blocks;
  for (const RunChart& chart : report.charts) {
    blocks.push_back(heading("Run chart: " + chart.name));
    const auto numbers =
        std::count_if(chart.values.begin(), chart.values.end(), [](double v) { return std::isfinite(v); });
    if (numbers == 0)
      append(blocks, paragraph("No run of this shift has such a reading.", body_size_mm, ink::text));
    else
      blocks.push_back(chart_with_histogram(chart));
    if (!chart.note.empty()) append(blocks, paragraph(chart.note, small_size_mm, ink::quiet));
    blocks.push_back(gap(6.0));
  }
  return blocks;
}

std::vector<Block> stretches(const ShiftReport& report) {
  if (report.stretches.empty()) return {};
  const bool days = report.stretches.front().begin.size() == 10;
  std::vector<Block> blocks{heading(days ? "Day by day" : "Hour by hour")};
  append(blocks, stretch_plots(report.stretches));
  append(blocks, paragraph("Production runs that ended in each " + std::string{days ? "day" : "hour"} +
                               "; the figure above a bar is the yield of its runs.",
                           small_size_mm, ink::quiet));
  blocks.push_back(gap(7.0));
  return blocks;
}

std::string runs_words(const ShiftReport& report) {
  if (!report.runs) return "";
  std::string words = std::to_string(report.runs->all) + " production: " + std::to_string(report.runs->passed) +
                      " passed, " + std::to_string(report.runs->failed) + " failed, " +
                      std::to_string(report.runs->voided) + " void";
  if (report.sent_to_rework > 0) words += "; " + std::to_string(report.sent_to_rework) + " sent to rework";
  if (report.left_open > 0) words += "; " + std::to_string(report.left_open) + " had begun and not ended";
  for (const std::string& other : report.others) words += "\n" + other + " (not counted above)";
  return words;
}

std::string title_words(const ShiftReport& report) {
  return report.lot.empty() ? "Shift report, " + report.station : "Lot " + report.lot + ", " + report.station;
}

std::vector<Block> nests(const ShiftReport& report) {
  std::vector<Block> blocks{heading("Nests")};
  std::vector<Cells> rows;
  for (const NestRow& nest : report.nests)
    rows.push_back({nest.name, std::to_string(nest.runs), std::to_string(nest.passed), std::to_string(nest.failed),
                    std::to_string(nest.voided), percent(nest.passed, nest.passed + nest.failed),
                    nest.mean_cycle_s ? fixed(*nest.mean_cycle_s, 1) + " s" : "none",
                    nest.commonest_failing_check.empty() ? "none" : nest.commonest_failing_check});
  if (rows.empty()) {
    append(blocks, paragraph("No nest was used in this shift.", body_size_mm, ink::text));
    return blocks;
  }
  append(blocks, table({{"nest", 28.0, Align::left},
                        {"runs", 16.0, Align::right},
                        {"passed", 18.0, Align::right},
                        {"failed", 16.0, Align::right},
                        {"void", 14.0, Align::right},
                        {"passed of judged", 20.0, Align::right},
                        {"mean cycle", 18.0, Align::right},
                        {"commonest failing check", 40.0, Align::left}},
                       rows));
  return blocks;
}

std::vector<Block> everything(const ShiftReport& report) {
  std::vector<Block> blocks{title_line(title_words(report))};
  std::vector<std::string> people;
  for (const ShiftPerson& person : report.people) people.push_back(person.name + " (" + person.role + ")");
  append(blocks, fact_lines({{report.lot.empty() ? "shift" : "time", from_to(report)},
                             {"people", joined(people, ", ", "nobody signed in")},
                             {"lots", joined(report.lots, "\n", "none open")},
                             {"purpose", report.purpose + (report.emulated ? ", on an emulated bench" : "")}}));
  if (const std::string runs = runs_words(report); !runs.empty()) append(blocks, fact_lines({{"runs", runs}}));
  blocks.push_back(gap(6.0));
  blocks.push_back(tiles(report.counts));
  append(blocks, failing(report));
  blocks.push_back(gap(7.0));
  append(blocks, stretches(report));
  append(blocks, nests(report));
  blocks.push_back(gap(7.0));
  append(blocks, charts(report));
  append(blocks, seal_blocks(report.seal, report.entry, report.verify_command));
  blocks.push_back(gap(6.0));
  append(blocks, paragraph(report.cautions, small_size_mm, ink::quiet));
  return blocks;
}

bool is_seal(const std::string& text) {
  return text.size() == 64 && text.find_first_not_of("0123456789abcdef") == std::string::npos;
}

std::optional<Problem> fault_of(const ShiftReport& report) {
  const ShiftCounts& counts = report.counts;
  const bool negative = std::min({counts.passed, counts.passed_first_time, counts.failed, counts.voided}) < 0;
  if (negative || counts.tested != counts.passed + counts.failed + counts.voided ||
      counts.passed_first_time > counts.passed + counts.failed)
    return Problem{"report_counts",
                   "",
                   {{"tested", std::to_string(counts.tested)},
                    {"passed", std::to_string(counts.passed)},
                    {"failed", std::to_string(counts.failed)},
                    {"voided", std::to_string(counts.voided)},
                    {"first", std::to_string(counts.passed_first_time)}}};
  if (!is_seal(report.seal)) return Problem{"report_no_seal", "", {{"text", report.seal}}};
  return std::nullopt;
}

}  // namespace

Result<int> write_shift_report(const ShiftReport& report, const std::filesystem::path& path) {
  if (auto fault = fault_of(report)) return *fault;
  if (auto fault = not_drawable()) return *fault;
  Paper paper;
  paper.title = title_words(report) + ", " + to_the_minute(report, report.begin);
  paper.foot = report.station + ", entry " + std::to_string(report.entry) + ", seal " + report.seal.substr(0, 16) +
               "..., printed " + to_the_minute(report, report.printed);
  paper.overprint = overprint_of(report.purpose, report.emulated);
  paper.blocks = everything(report);
  int pages = 0;
  QByteArray bytes = pdf_of(paper, pages);
  if (!set_creation_time(bytes, report.printed)) return Problem{"page_not_finished", path.string()};
  const auto written = replace_file(path, bytes);
  if (written.has_error()) return written.error();
  return pages;
}

}  // namespace probewright::pages
