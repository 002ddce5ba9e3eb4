#include "station/pages/shift_report.h"

#include <QByteArray>
#include <algorithm>
#include <cmath>
#include <iterator>
#include <string_view>

#include "station/base/numbers.h"
#include "station/pages/drawing_room.h"
#include "station/pages/files_out.h"
#include "station/pages/pdf_bytes.h"
#include "station/pages/plots.h"
#include "station/pages/table_blocks.h"

namespace probewright::pages {
namespace {

constexpr std::size_t most_bars = 10;
constexpr double body_mm = 3.1;

void add(std::vector<Block>& to, std::vector<Block> blocks) {
  to.insert(to.end(), std::make_move_iterator(blocks.begin()), std::make_move_iterator(blocks.end()));
}

std::string percent(int part, int whole) {
  return whole > 0 ? fixed(100.0 * part / whole, 1) + " %" : std::string{"none"};
}

std::string joined(const std::vector<std::string>& texts, std::string_view between, std::string_view if_empty) {
  std::string all;
  for (const std::string& text : texts) all.append(all.empty() ? "" : between).append(text);
  return all.empty() ? std::string{if_empty} : all;
}

// "2026-12-01 06:00" of "2026-12-01 06:00:00".
std::string to_the_minute(const ShiftReport& report, UtcTime time) {
  return report.zone.local_text(time).substr(0, 16);
}

// The day is not said twice.
std::string from_to(const ShiftReport& report) {
  const std::string begin = to_the_minute(report, report.begin), end = to_the_minute(report, report.end);
  const bool same_day = begin.substr(0, 10) == end.substr(0, 10);
  return begin + " to " + (same_day ? end.substr(11) : end) + " (" + report.zone.name() + ")";
}

Block title(const std::string& text) {
  return {11.0,
          [text](const Canvas& canvas, QRectF box) {
            canvas.line({box.x(), box.y(), box.width(), 8.0}, qt(text),
                        canvas.fitting_mm(qt(text), Weight::bold, 6.6, box.width()), Weight::bold, Align::left,
                        ink::text);
          },
          true, false, nullptr};
}

constexpr double names_mm = 26.0, fact_line_mm = 4.7;

// One line of a fact: its name in grey at the left of the first.
Block fact_line(const QString& name, const QString& line) {
  return {fact_line_mm,
          [name, line](const Canvas& canvas, QRectF box) {
            canvas.line(box, name, body_mm, Weight::plain, Align::left, ink::quiet);
            canvas.line(box.adjusted(names_mm, 0, 0, 0), line, body_mm, Weight::plain, Align::left, ink::text);
          },
          false, false, nullptr};
}

std::vector<Block> facts(const std::vector<std::pair<std::string, std::string>>& pairs) {
  const Canvas measure = measuring_canvas();
  std::vector<Block> blocks;
  for (const auto& [name, value] : pairs) {
    QString first = qt(name);
    for (const QString& line : wrapped(measure, qt(value), measure.font(body_mm), column_mm - names_mm)) {
      blocks.push_back(fact_line(first, line));
      first.clear();
    }
  }
  return blocks;
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
    add(blocks, paragraph("No check failed in this shift.", body_mm, ink::text));
    return blocks;
  }
  const auto checks = commonest_first(report.failing_checks);
  const std::size_t bars = std::min(checks.size(), most_bars);
  blocks.push_back(bar_plot({checks.begin(), checks.begin() + static_cast<std::ptrdiff_t>(bars)}));
  if (bars < checks.size())
    add(blocks, paragraph("The " + std::to_string(bars) + " commonest of " + std::to_string(checks.size()) +
                              " are drawn; the table has all.",
                          2.7, ink::quiet));
  blocks.push_back(gap(3.0));
  std::vector<Cells> rows;
  for (const FailingCheck& check : checks)
    rows.push_back(
        {check.name, std::to_string(check.runs), check.likely_cause.empty() ? "not told" : check.likely_cause});
  add(blocks,
      table({{"check", 66.0, Align::left}, {"failed runs", 24.0, Align::right}, {"likely cause", 80.0, Align::left}},
            rows));
  return blocks;
}

std::vector<Block> chart_of(const ShiftReport& report) {
  if (!report.chart) return {};
  const RunChart& chart = *report.chart;
  std::vector<Block> blocks{heading("Run chart: " + chart.name)};
  const auto numbers =
      std::count_if(chart.values.begin(), chart.values.end(), [](double v) { return std::isfinite(v); });
  if (numbers == 0)
    add(blocks, paragraph("No run of this shift has such a reading.", body_mm, ink::text));
  else
    blocks.push_back(run_chart(chart));
  return blocks;
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
    add(blocks, paragraph("No nest was used in this shift.", body_mm, ink::text));
    return blocks;
  }
  add(blocks, table({{"nest", 28.0, Align::left},
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

std::vector<Block> seal(const ShiftReport& report) {
  std::vector<Block> blocks{heading("Seal")};
  const std::vector<std::pair<std::string, std::string>> pairs{
      {"entry", std::to_string(report.entry)}, {"seal", report.seal}, {"to compare", report.verify_command}};
  auto lines = facts(pairs);
  for (Block& line : lines) line.with_next = true;
  add(blocks, std::move(lines));
  blocks.push_back(gap(1.5));
  add(blocks, paragraph("The ledger that this report was made from held this seal as the hash of entry " +
                            std::to_string(report.entry) +
                            ", then its newest. A "
                            "ledger that was changed or replaced since then does not.",
                        2.7, ink::quiet));
  return blocks;
}

std::vector<Block> everything(const ShiftReport& report) {
  std::vector<Block> blocks{title("Shift report, " + report.station)};
  std::vector<std::string> people;
  for (const ShiftPerson& person : report.people) people.push_back(person.name + " (" + person.role + ")");
  add(blocks, facts({{"shift", from_to(report)},
                     {"people", joined(people, ", ", "nobody signed in")},
                     {"lots", joined(report.lots, "\n", "none open")},
                     {"purpose", report.purpose + (report.emulated ? ", on an emulated bench" : "")}}));
  blocks.push_back(gap(6.0));
  blocks.push_back(tiles(report.counts));
  add(blocks, failing(report));
  blocks.push_back(gap(7.0));
  add(blocks, chart_of(report));
  blocks.push_back(gap(7.0));
  add(blocks, nests(report));
  blocks.push_back(gap(7.0));
  add(blocks, seal(report));
  blocks.push_back(gap(6.0));
  add(blocks, paragraph(report.cautions, 2.7, ink::quiet));
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
  paper.title = "Shift report, " + report.station + ", " + to_the_minute(report, report.begin);
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
