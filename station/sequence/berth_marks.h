#pragma once
#include <memory>
#include <span>
#include <vector>

#include "limits/sheet.h"
#include "station/measure/captures.h"
#include "station/measure/certificate.h"
#include "station/measure/model.h"
#include "station/sequence/line_view.h"

// What a berth shows of a run, made from its readings and captures. Pure; any thread.
namespace probewright::sequence {

/// The checks of a model's routine in the order in which they are made, each with its share of the device time.
std::vector<PassageStep> passage_of(const measure::Model& model);
/// Device time that the passage takes, s.
double expected_s(std::span<const PassageStep> passage);
/// Marks what has a reading as done.
void mark_done(std::vector<PassageStep>& passage, std::span<const JudgedReading> readings);

/// A mark for each judged reading of a two-sided or one-sided check, in the order of the readings.
std::vector<RailMark> rail_marks(std::span<const JudgedReading> readings, const limits::Sheet& sheet);

/// Decimated plots of what has been captured; nullptr when nothing can be drawn yet.
std::shared_ptr<const NestPlots> plots_of(const measure::Captures& captures,
                                          const measure::PhantomCertificate& certificate);

/// What the operator does with the probe after a run, one sentence.
std::string what_to_do(const RunOutcome& outcome);
/// The judged check with the smallest margin; empty when none has one.
std::string decided_by(std::span<const JudgedReading> readings);

}  // namespace probewright::sequence
