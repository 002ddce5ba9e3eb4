#include "station/pages/run_report.h"

#include "station/base/numbers.h"
#include "station/pages/capture_plots.h"
#include "station/pages/fact_blocks.h"
#include "station/pages/finish.h"
#include "station/pages/rails.h"
#include "station/pages/table_blocks.h"
#include "station/trace/history.h"
#include "station/trace/words.h"

namespace probewright::pages {
namespace {

using Pairs = std::vector<std::pair<std::string, std::string>>;

std::string joined_lines(const std::vector<std::string>& lines, std::string_view if_none) {
  std::string all;
  for (const std::string& line : lines) all += (all.empty() ? "" : "\n") + line;
  return all.empty() ? std::string{if_none} : all;
}

std::string run_times(const db::RunRecord& run, const Zone& zone) {
  const std::string opened = zone.local_text(run.opened_at);
  if (!run.closing) return opened + ", not ended (" + zone.name() + ")";
  const std::string closed = zone.local_text(run.closing->closed_at);
  const bool same_day = opened.substr(0, 10) == closed.substr(0, 10);
  return opened + " to " + (same_day ? closed.substr(11) : closed) + " (" + zone.name() + ")";
}

std::string run_cycle(const db::RunRecord& run) {
  const Body* cycle = run.closing ? run.closing->bench.find("cycle_us") : nullptr;
  return cycle && cycle->integer() ? fixed(static_cast<double>(*cycle->integer()) * 1e-6, 1) + " s" : "";
}

std::string documents_of_run(const db::RunRecord& run) {
  std::vector<std::string> lines;
  for (const db::NamedDocument& document : run.documents)
    lines.push_back(document.role + ": " + trace::document_words(document));
  return joined_lines(lines, "none");
}

std::string devices_of_run(const db::RunRecord& run) {
  std::vector<std::string> lines;
  for (const db::RunDevice& device : run.opened.devices) lines.push_back(trace::device_words(device));
  return joined_lines(lines, "none");
}

Pairs facts_of_run(const db::RunRecord& run, const trace::PageNotes& notes) {
  const db::RunOpened& opened = run.opened;
  Pairs pairs{{"serial", opened.serial},
              {"model", opened.model},
              {"lot", opened.lot.empty() ? "none" : opened.lot},
              {"time", run_times(run, notes.zone)},
              {"place", opened.station + ", nest " + std::to_string(opened.nest)},
              {"operator", opened.operator_name.empty() ? "not told" : opened.operator_name},
              {"purpose", opened.purpose + ", try " + std::to_string(opened.try_number) +
                              (opened.emulated ? ", on an emulated bench" : "")}};
  if (const std::string cycle = run_cycle(run); !cycle.empty()) pairs.push_back({"cycle", cycle});
  if (opened.ambient_temperature_C)
    pairs.push_back({"room", fixed(*opened.ambient_temperature_C, 1) + " \u00b0C at the start"});
  return pairs;
}

std::string why_of_run(const db::RunRecord& run) {
  if (!run.closing) return "The run was opened and never closed.";
  const db::ClosingRecord& closing = *run.closing;
  std::string why;
  if (closing.verdict != "pass") why = trace::cause_words(closing.cause, closing.cause_words, closing.failing);
  const std::string likely = closing.bench.text("likely_cause_words");
  if (!likely.empty()) why += "\nlikely cause: " + likely;
  const std::string rework = closing.bench.text("rework");
  if (!rework.empty()) why += "\nrework: " + rework;
  const db::ReadingRow* nearest = trace::nearest_to_an_edge(run);
  if (nearest && closing.verdict == "pass")
    why =
        "nearest to an edge: " + trace::shown_as(nearest->check) + ", margin " + trace::margin_words(*nearest->margin);
  return why;
}

std::vector<Block> rails_of_run(const db::RunRecord& run) {
  std::vector<trace::RailMark> marks;
  for (const db::ReadingRow& reading : run.readings)
    if (const auto mark = trace::rail_mark(reading)) marks.push_back(*mark);
  std::vector<Block> blocks{heading("Margins")};
  if (marks.empty()) {
    append(blocks, paragraph("No reading of this run was judged by numbers.", body_size_mm, ink::text));
    return blocks;
  }
  const db::ReadingRow* nearest = trace::nearest_to_an_edge(run);
  append(blocks, margin_rails(marks, nearest ? nearest->check : ""));
  blocks.push_back(gap(1.5));
  append(blocks, paragraph("The rails are the acceptance limits; the grey strips outside them are given up for "
                           "uncertainty (guard bands); a mark's line is its expanded uncertainty, k = 2.",
                           small_size_mm, ink::quiet));
  return blocks;
}

std::vector<Block> plots_of_run(const trace::RunStory& story) {
  std::vector<Block> blocks;
  if (!story.spectra.empty()) {
    blocks.push_back(heading("Spectra"));
    blocks.push_back(spectra_plot(story.spectra));
    blocks.push_back(gap(4.0));
  }
  if (!story.pulses.empty()) {
    blocks.push_back(heading("Pulse trains"));
    append(blocks, pulse_plots(story.pulses));
    blocks.push_back(gap(4.0));
  }
  if (story.spectra.empty() && story.pulses.empty()) {
    blocks.push_back(heading("Captures"));
    append(blocks, paragraph("No capture of this run can be drawn.", body_size_mm, ink::text));
  }
  for (const std::string& missing : story.not_drawn)
    append(blocks, paragraph("Not drawn as it should be: " + missing, small_size_mm, ink::quiet));
  return blocks;
}

std::vector<Block> readings_of_run(const db::RunRecord& run) {
  std::vector<Block> blocks{heading("Readings")};
  if (run.readings.empty()) {
    append(blocks, paragraph("The run has no readings.", body_size_mm, ink::text));
    return blocks;
  }
  std::vector<Cells> rows;
  for (const db::ReadingRow& reading : run.readings) {
    const trace::ReadingWords words = trace::words_of(reading);
    rows.push_back({words.check, words.value, words.expanded, words.unit, words.limits, words.accepted, words.margin,
                    words.state});
  }
  append(blocks, table({{"check", 40.0, Align::left},
                        {"value", 18.0, Align::right},
                        {"U (k = 2)", 18.0, Align::right},
                        {"unit", 13.0, Align::left},
                        {"limits", 23.0, Align::left},
                        {"accepted", 25.0, Align::left},
                        {"margin", 13.0, Align::right},
                        {"state", 20.0, Align::left}},
                       rows, {2.5, 2.5}));
  return blocks;
}

std::vector<Block> labels_of_run(const trace::RunStory& story, const Zone& zone) {
  if (story.labels.empty()) return {};
  std::vector<Block> blocks{heading("Labels")};
  std::vector<Cells> rows;
  for (const db::LabelRecord& label : story.labels)
    rows.push_back({std::to_string(label.entry), zone.local_text(label.made_at), label.kind, std::to_string(label.copy),
                    label.who, label.reason});
  append(blocks, table({{"entry", 18.0, Align::right},
                        {"made", 42.0, Align::left},
                        {"kind", 18.0, Align::left},
                        {"copy", 14.0, Align::right},
                        {"by", 34.0, Align::left},
                        {"reason", 44.0, Align::left}},
                       rows));
  blocks.push_back(gap(6.0));
  return blocks;
}

std::vector<Block> run_blocks(const trace::RunStory& story, const trace::PageNotes& notes) {
  const db::RunRecord& run = story.run;
  std::vector<Block> blocks{title_line("Run " + std::to_string(run.run.value) + ", " + run.opened.serial)};
  blocks.push_back(
      verdict_block(run.closing ? run.closing->verdict : "", trace::verdict_words(run.closing), why_of_run(run)));
  blocks.push_back(gap(3.0));
  append(blocks, fact_lines(facts_of_run(run, notes)));
  blocks.push_back(gap(6.0));
  append(blocks, rails_of_run(run));
  blocks.push_back(gap(6.0));
  append(blocks, plots_of_run(story));
  blocks.push_back(gap(4.0));
  append(blocks, readings_of_run(run));
  blocks.push_back(gap(6.0));
  append(blocks, labels_of_run(story, notes.zone));
  blocks.push_back(heading("What it stood on"));
  append(blocks, fact_lines({{"documents", documents_of_run(run)},
                             {"devices", devices_of_run(run)},
                             {"software", run.opened.software_version + ", commit " + run.opened.software_commit +
                                              ", " + run.opened.compiler}}));
  if (run.closing)
    append(blocks, fact_lines({{"closing", "entry " + std::to_string(run.closing->entry) + ", hash " +
                                               to_hex(run.closing->hash).substr(0, 32) + "..."}}));
  blocks.push_back(gap(6.0));
  append(blocks, seal_blocks(to_hex(story.seal.hash), story.seal.entry, notes.verify_command));
  blocks.push_back(gap(5.0));
  append(blocks, paragraph(notes.cautions, small_size_mm, ink::quiet));
  return blocks;
}

}  // namespace

Result<int> write_run_report(const trace::RunStory& story, const trace::PageNotes& notes,
                             const std::filesystem::path& path) {
  const db::RunOpened& opened = story.run.opened;
  const std::string title = "Run " + std::to_string(story.run.run.value) + ", " + opened.serial;
  return write_pages(
      {title, opened.station + ", " + title, overprint_of(opened.purpose, opened.emulated)}, story.seal, notes,
      [&] { return run_blocks(story, notes); }, path);
}

}  // namespace probewright::pages
