#include "station/text/berth_lines.h"

#include <algorithm>

#include "station/base/catalogue.h"
#include "station/base/numbers.h"

namespace probewright::text {
namespace {

using sequence::BerthView;
using sequence::LineView;
using sequence::NestState;
using sequence::RunVerdict;

constexpr std::size_t bar_width = 10, serial_width = 16;

std::string padded(std::string text, std::size_t width) {
  text.resize(std::max(text.size(), width), ' ');
  return text;
}

std::string state_word(NestState state) {
  switch (state) {
    case NestState::not_ready:
      return "not ready";
    case NestState::empty:
      return "empty";
    case NestState::occupied:
      return "occupied";
    case NestState::armed:
      return "armed";
    case NestState::running:
      return "testing";
  }
  return "";
}

std::string bar(double progress) {
  const auto done = static_cast<std::size_t>(std::clamp(progress, 0.0, 1.0) * bar_width + 0.5);
  return std::string(done, '=') + std::string(bar_width - done, '.');
}

std::string last_words(const BerthView& berth) {
  const auto& last = *berth.last;
  if (!last.recorded) return padded(last.serial, serial_width) + "  NOT ON RECORD  " + last.what_to_do;
  std::string words = padded(last.serial, serial_width) + "  " + verdict_word(last.verdict);
  if (last.verdict != RunVerdict::pass && !last.cause_words.empty()) words += "  " + last.cause_words;
  if (!last.what_to_do.empty()) words += "  " + last.what_to_do;
  return words;
}

std::string passage(const BerthView& berth) {
  const auto& nest = berth.nest;
  return padded(nest.serial, serial_width) + "  " + bar(berth.progress) + "  " + std::to_string(nest.stage) + "/" +
         std::to_string(nest.stages) + " " + nest.doing;
}

}  // namespace

std::string verdict_word(RunVerdict verdict) {
  return verdict == RunVerdict::pass ? "PASS" : verdict == RunVerdict::fail ? "FAIL" : "VOID";
}

std::string berth_line(const BerthView& berth) {
  const auto& nest = berth.nest;
  const std::string head = padded("nest " + std::to_string(nest.nest), 8) + padded(state_word(nest.state), 11);
  switch (nest.state) {
    case NestState::running:
      return head + passage(berth);
    case NestState::armed:
      return head + padded(nest.serial, serial_width) + "  " + nest.words + ", " + std::to_string(berth.armed_left_s) +
             " s left";
    case NestState::not_ready:
      return head + nest.words;
    case NestState::empty:
    case NestState::occupied:
      break;
  }
  return head + (berth.last ? last_words(berth) : nest.words);
}

std::vector<std::string> head_lines(const LineView& view) {
  std::string first = view.station + (view.emulated ? " (DEMONSTRATION)" : "") + ": ";
  first += view.trouble ? "not ready: " + view.trouble->text() : "ready";
  if (!view.next_due.empty()) first += "; next due: " + view.next_due;
  std::string second = view.person ? view.person->name + ", " + view.person->role : "nobody is signed in";
  if (view.lot)
    second += "; lot " + view.lot->lot + ", " + view.lot->model + ", sheet " +
              std::to_string(view.lot->sheet_revision) + ": " + std::to_string(view.lot->tested) + " of " +
              std::to_string(view.lot->quantity);
  const auto& tally = view.tally;
  second += "; " + std::to_string(tally.passed) + " passed, " + std::to_string(tally.failed) + " failed, " +
            std::to_string(tally.voids) + " void";
  if (tally.probes_per_hour > 0.0) second += ", " + fixed(tally.probes_per_hour, 0) + " an hour";
  return {first, second};
}

std::string names_of(const std::vector<std::string>& checks) {
  std::string names;
  for (const std::string& check : checks) {
    const Check* known = find_check(check);
    names += (names.empty() ? "" : ", ") + (known ? std::string{known->shown_as} : check);
  }
  return names;
}

std::string run_line(const sequence::RunOutcome& outcome, double speed) {
  std::string line =
      "nest " + std::to_string(outcome.nest) + ": " + outcome.serial + " " + verdict_word(outcome.verdict);
  if (!outcome.failing.empty()) line += " (" + names_of(outcome.failing) + ")";
  if (outcome.verdict == RunVerdict::void_run) line += " (" + outcome.cause_words + ")";
  return line + ", run " + std::to_string(outcome.run) + ", " + fixed(seconds(outcome.cycle) * speed, 2) + " s";
}

}  // namespace probewright::text
