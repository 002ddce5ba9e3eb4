#include "station/text/demo_summary.h"

#include <algorithm>
#include <cctype>
#include <map>

#include "station/base/numbers.h"
#include "station/text/berth_lines.h"
#include "station/text/table.h"

namespace probewright::text {
namespace {

using sequence::RunVerdict;
using sequence::production::Piece;

constexpr int indent = 2;

/// A word of a command line that a shell takes as it is.
std::string shell_word(const std::string& text) {
  const auto plain = [](char c) {
    return std::isalnum(static_cast<unsigned char>(c)) || std::string_view{"_-./+:"}.find(c) != std::string_view::npos;
  };
  if (!text.empty() && std::all_of(text.begin(), text.end(), plain)) return text;
  std::string quoted = "'";
  for (const char c : text) quoted += c == '\'' ? std::string{"'\\''"} : std::string{c};
  return quoted + "'";
}

std::string percent(int part, int whole) {
  return whole == 0
             ? "none"
             : fixed(100.0 * part / whole, 1) + " % (" + std::to_string(part) + " of " + std::to_string(whole) + ")";
}

/// The runs of each piece with a verdict, in order.
std::map<std::size_t, std::vector<const DemoRun*>> by_piece(const std::vector<DemoRun>& runs) {
  std::map<std::size_t, std::vector<const DemoRun*>> pieces;
  for (const DemoRun& run : runs)
    if (run.outcome.verdict != RunVerdict::void_run) pieces[run.piece].push_back(&run);
  return pieces;
}

std::string yield_words(const DemoResult& result) {
  int first = 0;
  const auto pieces = by_piece(result.runs);
  for (const auto& [piece, runs] : pieces) first += runs.front()->outcome.verdict == RunVerdict::pass;
  return "first-pass yield  " + percent(first, static_cast<int>(pieces.size())) + "\n";
}

std::string time_words(const DemoResult& result, double speed) {
  double sum_s = 0.0, longest_s = 0.0;
  int measured = 0;
  for (const DemoRun& run : result.runs) {
    if (run.outcome.verdict == RunVerdict::void_run) continue;
    const double cycle_s = seconds(run.outcome.cycle) * speed;
    sum_s += cycle_s;
    longest_s = std::max(longest_s, cycle_s);
    ++measured;
  }
  std::string words = "time              " + fixed(seconds(result.took), 1) + " s";
  if (measured > 0)
    words += "; a run " + fixed(sum_s / measured, 2) + " s of device time, the longest " + fixed(longest_s, 2) + " s";
  return words + "\n";
}

std::string failing_words(const std::vector<DemoRun>& runs) {
  std::map<std::string, int> counts;
  for (const DemoRun& run : runs)
    for (const std::string& check : run.outcome.failing) ++counts[check];
  if (counts.empty()) return {};
  std::vector<std::pair<std::string, int>> sorted{counts.begin(), counts.end()};
  std::stable_sort(sorted.begin(), sorted.end(), [](const auto& a, const auto& b) { return a.second > b.second; });
  Table table({"failing check", "runs"}, {Side::left, Side::right});
  for (const auto& [check, count] : sorted) table.add({names_of({check}), std::to_string(count)});
  return "\n" + table.text() + "\n";
}

/// What was planted and what came of it: told from the lot, which the bench knows and the station does not.
std::string planted_words(const std::vector<Piece>& lot, const DemoResult& result) {
  const auto pieces = by_piece(result.runs);
  Table table({"planted", "serial", "verdict", "failing"});
  int planted = 0, found = 0, healthy = 0, healthy_failed = 0;
  for (const auto& [piece, runs] : pieces) {
    const DemoRun& last = *runs.back();
    const bool failed = last.outcome.verdict == RunVerdict::fail;
    (lot[piece].fault.empty() ? healthy : planted) += 1;
    (lot[piece].fault.empty() ? healthy_failed : found) += failed;
    if (lot[piece].fault.empty() && !failed) continue;
    std::string failing = names_of(last.outcome.failing);
    if (!last.likely_cause.empty()) failing += "; likely cause: " + last.likely_cause;
    table.add({lot[piece].fault.empty() ? "nothing" : lot[piece].fault, lot[piece].serial,
               verdict_word(last.outcome.verdict), failing});
  }
  return "\nWhat the bench knows and the station does not: " + std::to_string(planted) +
         " of the tested probes had a fault planted in them, " + std::to_string(found) + " of these failed; " +
         std::to_string(healthy_failed) + " of " + std::to_string(healthy) + " healthy ones failed.\n" +
         (table.empty() ? "" : table.text(indent) + "\n");
}

std::string blunder_words(const std::vector<Piece>& lot, const sequence::production::Work& work) {
  if (work.blunders.empty()) return {};
  std::string text = "\nMistakes of the operator, and what the line said:\n";
  for (const auto& blunder : work.blunders) {
    text += "  " + lot[blunder.piece].serial + " " + std::string{slug(blunder.mistake)} + ": ";
    std::string told = blunder.made ? "" : "there was no occasion for it";
    for (const std::string& words : blunder.told) told += (told.empty() ? "" : " / ") + words;
    text += told + "\n";
  }
  return text;
}

std::string left_words(const std::vector<Piece>& lot, const sequence::production::Work& work) {
  std::string text;
  for (const std::string& words : work.unrecorded) text += "  not on record: " + words + "\n";
  std::map<std::string, std::vector<std::string>> by_reason;
  for (const auto& left : work.left_out) {
    // The line's sentence names the serial; the same sentence without it is one reason.
    std::string reason = left.told;
    const std::string& serial = lot[left.piece].serial;
    if (const auto at = reason.find(serial); at != std::string::npos) reason.replace(at, serial.size(), "it");
    by_reason[reason].push_back(serial);
  }
  for (const auto& [reason, serials] : by_reason)
    text += "  " + std::to_string(serials.size()) + " not tested, " + serials.front() +
            (serials.size() > 1 ? " to " + serials.back() : std::string{}) + ": " + reason + "\n";
  return text.empty() ? text : "\nLeft out:\n" + text;
}

std::string place_words(const DemoOptions& options, const DemoParts& parts, const DemoResult& result) {
  const std::string program = shell_word(options.program), ledger = shell_word(result.folder.ledger());
  std::string text = "\nledger   " + result.folder.ledger() + "\n";
  text += "labels   " +
          (result.labels ? result.folder.labels() + " (" + std::to_string(*result.labels) + ")"
                         : std::string{"none were made"}) +
          "\n";
  text += "report   " + (result.report ? result.folder.report() : std::string{"none was made"}) + "\n";
  text += "truth    " + result.folder.truth() + " (what the probes really are; the station never reads it)\n";
  text += "seal     entry " + std::to_string(result.seal_entry) + ", " + result.seal + "\n\nTo look further:\n";
  text += "  " + program + " ledger verify " + ledger + " --entry " + std::to_string(result.seal_entry) + " --seal " +
          result.seal + "\n";
  if (!parts.lot.empty()) text += "  " + program + " trace " + parts.lot.front().serial + " --ledger " + ledger + "\n";
  return text;
}

Json run_json(const DemoRun& run, double speed) {
  Json failing = Json::array();
  for (const std::string& check : run.outcome.failing) failing.add(check);
  Json json = Json::object();
  json.set("serial", run.outcome.serial).set("nest", run.outcome.nest).set("verdict", slug(run.outcome.verdict));
  json.set("failing", std::move(failing));
  json.set("likely_cause", run.likely_cause.empty() ? Json{} : Json{run.likely_cause});
  json.set("cycle_s", seconds(run.outcome.cycle) * speed).set("device_floor_s", run.device_floor_s);
  return json;
}

}  // namespace

VerdictCounts counts_of(const std::vector<DemoRun>& runs) {
  VerdictCounts counts;
  for (const DemoRun& run : runs) {
    counts.passed += run.outcome.verdict == RunVerdict::pass;
    counts.failed += run.outcome.verdict == RunVerdict::fail;
    counts.voided += run.outcome.verdict == RunVerdict::void_run;
  }
  return counts;
}

std::string demo_text(const DemoOptions& options, const DemoParts& parts, const DemoResult& result) {
  std::string text = "Lot " + parts.lot_name + ": " + std::to_string(parts.lot.size()) + " probes, " +
                     std::to_string(options.nests) + " nests, speed " + shortest(options.speed) + ", seed " +
                     std::to_string(options.seed) + "\nDEMONSTRATION, made on an emulated bench\n";
  if (result.interrupted) text += "Stopped before its end.\n";
  if (!result.work.trouble.empty()) text += "The work ended early: " + result.work.trouble + "\n";
  text += "\n" + yield_words(result) + time_words(result, options.speed) + failing_words(result.runs);
  text += planted_words(parts.lot, result) + blunder_words(parts.lot, result.work) + left_words(parts.lot, result.work);
  text += place_words(options, parts, result);
  const VerdictCounts counts = counts_of(result.runs);
  return text + "\n" + std::to_string(counts.passed) + " passed, " + std::to_string(counts.failed) + " failed, " +
         std::to_string(counts.voided) + " void\n";
}

Json demo_json(const DemoResult& result, double speed) {
  const VerdictCounts counts = counts_of(result.runs);
  Json runs = Json::array();
  for (const DemoRun& run : result.runs) runs.add(run_json(run, speed));
  Json json = Json::object();
  json.set("format", 1).set("runs", std::move(runs));
  json.set("passed", counts.passed).set("failed", counts.failed).set("void", counts.voided);
  json.set("ledger", result.folder.ledger());
  json.set("labels", result.labels ? Json{result.folder.labels()} : Json{});
  json.set("report", result.report ? Json{result.folder.report()} : Json{});
  return std::move(json.set("truth", result.folder.truth()));
}

}  // namespace probewright::text
