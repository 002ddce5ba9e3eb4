#include "station/pages/serial_report.h"

#include <algorithm>
#include <map>
#include <set>

#include "station/base/catalogue.h"
#include "station/pages/fact_blocks.h"
#include "station/pages/finish.h"
#include "station/pages/life_line.h"
#include "station/pages/table_blocks.h"
#include "station/trace/words.h"

namespace probewright::pages {
namespace {

constexpr std::size_t most_side_by_side = 4;

std::string set_words(const std::set<std::string>& words, std::string_view if_none) {
  std::string all;
  for (const std::string& word : words)
    if (!word.empty()) all += (all.empty() ? "" : ", ") + word;
  return all.empty() ? std::string{if_none} : all;
}

std::string tally_words(const trace::History& history) {
  const trace::Tally tally = trace::tally_of(history);
  std::string words = std::to_string(tally.all()) + (tally.all() == 1 ? " run" : " runs");
  const auto add = [&](int count, const char* what) {
    if (count > 0) words += ", " + std::to_string(count) + " " + what;
  };
  add(tally.pass, "pass"), add(tally.fail, "fail"), add(tally.void_runs, "void"), add(tally.open, "open");
  return words;
}

// The newest production run decides; a serial that was never in production has no verdict.
const db::RunRecord* last_production(const trace::History& history) {
  for (auto run = history.runs.rbegin(); run != history.runs.rend(); ++run)
    if (run->opened.purpose == "production") return &*run;
  return nullptr;
}

std::vector<LifeMark> marks_of(const trace::History& history) {
  std::map<std::int64_t, LifeMark> marks;  // by entry
  for (const db::RunRecord& run : history.runs) {
    std::string words = run.closing ? trace::verdict_words(run.closing) : "OPEN";
    if (run.opened.purpose != "production") words = run.opened.purpose + ": " + words;
    marks[run.run.value] = {run.opened_at, run.closing ? run.closing->verdict : "", words, true};
  }
  for (const db::EntryRecord& entry : history.entries) {
    if (entry.kind == "sign_in" || entry.kind.starts_with("lot_")) continue;
    const std::string kind = entry.kind == "label_made" ? entry.data.text("kind") + " label" : entry.kind;
    const std::int64_t copy = entry.data.number("copy", 1);
    marks[entry.number] = {entry.time, "", copy > 1 ? kind + ", copy " + std::to_string(copy) : kind, false};
  }
  std::vector<LifeMark> all;
  for (auto& [number, mark] : marks) all.push_back(std::move(mark));
  return all;
}

std::string why_ended(const db::RunRecord& run) {
  if (!run.closing) return "not ended";
  if (run.closing->verdict == "pass") {
    const db::ReadingRow* nearest = trace::nearest_to_an_edge(run);
    return nearest ? "nearest: " + trace::shown_as(nearest->check) + ", margin " + trace::margin_words(*nearest->margin)
                   : "";
  }
  const std::string likely = run.closing->bench.text("likely_cause_words");
  return trace::cause_words(run.closing->cause, run.closing->cause_words, run.closing->failing) +
         (likely.empty() ? "" : "; likely: " + likely);
}

std::vector<Block> runs_of_serial(const trace::History& history, const Zone& zone) {
  std::vector<Block> blocks{heading("Runs")};
  std::vector<Cells> rows;
  for (const db::RunRecord& run : history.runs)
    rows.push_back({std::to_string(run.run.value), minute_of(zone.local_text(run.opened_at)), run.opened.purpose,
                    std::to_string(run.opened.try_number), std::to_string(run.opened.nest), run.opened.operator_name,
                    trace::verdict_words(run.closing), why_ended(run)});
  append(blocks, table({{"run", 13.0, Align::right},
                        {"opened", 27.0, Align::left},
                        {"purpose", 20.0, Align::left},
                        {"try", 8.0, Align::right},
                        {"nest", 9.0, Align::right},
                        {"operator", 24.0, Align::left},
                        {"verdict", 18.0, Align::left},
                        {"why", 51.0, Align::left}},
                       rows, {2.6, 2.5}));
  return blocks;
}

const db::ReadingRow* reading_in(const db::RunRecord& run, const std::string& check) {
  for (const db::ReadingRow& reading : run.readings)
    if (reading.check == check) return &reading;
  return nullptr;
}

std::string value_cell(const db::ReadingRow* reading) {
  if (!reading) return "\u2013";
  const trace::ReadingWords words = trace::words_of(*reading);
  if (words.value.empty()) return "none";
  const auto standing = trace::standing_of(*reading);
  const bool bad = reading->ok == "not_ok" || standing == trace::Standing::missing;
  return words.value + (bad ? " \u00d7" : "");
}

// Runs that have readings, the newest last.
std::vector<const db::RunRecord*> newest_runs(const trace::History& history) {
  std::vector<const db::RunRecord*> runs;
  for (auto run = history.runs.rbegin(); run != history.runs.rend() && runs.size() < most_side_by_side; ++run)
    if (!run->readings.empty()) runs.push_back(&*run);
  std::reverse(runs.begin(), runs.end());
  return runs;
}

std::vector<Block> readings_side_by_side(const trace::History& history) {
  const auto runs = newest_runs(history);
  std::vector<Block> blocks{heading("Readings")};
  if (runs.empty()) {
    append(blocks, paragraph("No run of this serial has readings.", body_size_mm, ink::text));
    return blocks;
  }
  std::map<int, std::string> checks;  // in catalogue order
  for (const db::RunRecord* run : runs)
    for (const db::ReadingRow& reading : run->readings) checks[check_index(reading.check)] = reading.check;
  std::vector<Column> columns{{"check", 52.0, Align::left}};
  for (const db::RunRecord* run : runs)
    columns.push_back({"run " + std::to_string(run->run.value), 21.0, Align::right});
  columns.push_back({"unit", 13.0, Align::left});
  columns.push_back({"limits of the newest", column_mm - 65.0 - 21.0 * static_cast<double>(runs.size()), Align::left});
  std::vector<Cells> rows;
  for (const auto& [place, check] : checks) {
    Cells cells{trace::shown_as(check)};
    const db::ReadingRow* newest = nullptr;
    for (const db::RunRecord* run : runs) {
      const db::ReadingRow* reading = reading_in(*run, check);
      cells.push_back(value_cell(reading));
      if (reading) newest = reading;
    }
    const trace::ReadingWords words = newest ? trace::words_of(*newest) : trace::ReadingWords{};
    cells.push_back(words.unit);
    cells.push_back(words.limits);
    rows.push_back(std::move(cells));
  }
  append(blocks, table(columns, rows, {2.5, 2.5}));
  blocks.push_back(gap(1.5));
  const bool more = std::count_if(history.runs.begin(), history.runs.end(), [](const db::RunRecord& run) {
                      return !run.readings.empty();
                    }) > static_cast<std::ptrdiff_t>(runs.size());
  append(blocks,
         paragraph("\u00d7 not ok in that run." + std::string{more ? " Older runs are not in this table; each has "
                                                                     "its own report."
                                                                   : ""},
                   small_size_mm, ink::quiet));
  return blocks;
}

std::vector<Block> entries_of_serial(const trace::History& history, const Zone& zone) {
  std::vector<Block> blocks{heading("Labels, lots and sign-ins")};
  if (history.entries.empty()) {
    append(blocks, paragraph("The ledger holds none for this serial.", body_size_mm, ink::text));
    return blocks;
  }
  std::vector<Cells> rows;
  for (const db::EntryRecord& entry : history.entries)
    rows.push_back(
        {std::to_string(entry.number), zone.local_text(entry.time), entry.kind, entry.who, trace::entry_words(entry)});
  append(blocks, table({{"entry", 15.0, Align::right},
                        {"time", 33.0, Align::left},
                        {"kind", 24.0, Align::left},
                        {"who", 26.0, Align::left},
                        {"what", 72.0, Align::left}},
                       rows, {2.6, 2.5}));
  return blocks;
}

std::vector<Block> life_blocks(const trace::History& history, const trace::PageNotes& notes) {
  std::set<std::string> lots, models, stations;
  for (const db::RunRecord& run : history.runs) {
    lots.insert(run.opened.lot);
    models.insert(run.opened.model);
    stations.insert(run.opened.station);
  }
  std::vector<Block> blocks{title_line("Life of " + history.serial)};
  if (const db::RunRecord* last = last_production(history))
    blocks.push_back(
        verdict_block(last->closing ? last->closing->verdict : "", trace::verdict_words(last->closing),
                      "last production run, " + std::to_string(last->run.value) + "\n" + why_ended(*last)));
  else
    blocks.push_back(verdict_block("", "NO VERDICT", "this serial was never in a production run"));
  blocks.push_back(gap(3.0));
  append(blocks, fact_lines({{"model", set_words(models, "none")},
                             {"lots", set_words(lots, "none")},
                             {"station", set_words(stations, "none")},
                             {"runs", tally_words(history)}}));
  blocks.push_back(gap(6.0));
  blocks.push_back(heading("Life line (" + notes.zone.name() + ")"));
  append(blocks, life_line(marks_of(history), notes.zone));
  blocks.push_back(gap(4.0));
  append(blocks, runs_of_serial(history, notes.zone));
  blocks.push_back(gap(6.0));
  append(blocks, readings_side_by_side(history));
  blocks.push_back(gap(6.0));
  append(blocks, entries_of_serial(history, notes.zone));
  blocks.push_back(gap(6.0));
  append(blocks, seal_blocks(to_hex(history.seal.hash), history.seal.entry, notes.verify_command));
  blocks.push_back(gap(5.0));
  append(blocks, paragraph(notes.cautions, small_size_mm, ink::quiet));
  return blocks;
}

// Emulated if any run is; a purpose is told only where no run was production.
std::string overprint_of_life(const trace::History& history) {
  const bool emulated = std::any_of(history.runs.begin(), history.runs.end(),
                                    [](const db::RunRecord& run) { return run.opened.emulated; });
  std::set<std::string> purposes;
  for (const db::RunRecord& run : history.runs) purposes.insert(run.opened.purpose);
  const bool one_other = purposes.size() == 1 && *purposes.begin() != "production";
  return overprint_of(one_other ? *purposes.begin() : "production", emulated);
}

}  // namespace

Result<int> write_serial_report(const trace::History& history, const trace::PageNotes& notes,
                                const std::filesystem::path& path) {
  return write_pages(
      {"Life of " + history.serial, history.serial, overprint_of_life(history)}, history.seal, notes,
      [&] { return life_blocks(history, notes); }, path);
}

}  // namespace probewright::pages
