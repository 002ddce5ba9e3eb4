#pragma once
#include <string>
#include <vector>

#include "station/sequence/line_view.h"

namespace probewright::text {

/// One nest on one line: state, serial, how far it is, or its last verdict and what to do.
/// "nest 1  testing  AQ20-048-00005  =====.....  4/7 red spectrum"
std::string berth_line(const sequence::BerthView& berth);

/// Ready or not and why; who is signed in; the lot; the tally: the lines above the berths.
std::vector<std::string> head_lines(const sequence::LineView& view);

/// "PASS", "FAIL", "VOID"
std::string verdict_word(sequence::RunVerdict verdict);

/// A run's end in one sentence: "nest 2: AQ20-048-00005 FAIL (dark current), run 12, 2.99 s".
std::string run_line(const sequence::RunOutcome& outcome, double speed);

/// Names of checks in words, "dark current, ID resistor".
std::string names_of(const std::vector<std::string>& checks);

}  // namespace probewright::text
