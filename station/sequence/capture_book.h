#pragma once
#include "station/measure/capture_format.h"
#include "station/sequence/run_step.h"

namespace probewright::sequence {

/// What a routine tells while it gathers; what becomes of it is the book's business. Line thread only.
class CaptureBook {
 public:
  CaptureBook() = default;
  CaptureBook(const CaptureBook&) = delete;
  CaptureBook& operator=(const CaptureBook&) = delete;
  virtual ~CaptureBook() = default;

  /// Notes a capture of the stage that goes on. It counts from stage_done() on: a probe that is taken out in mid-stage
  /// leaves nothing of it.
  virtual void add(measure::AnyCapture capture) = 0;
  /// Notes a step that was made.
  virtual void note(RunStep step) = 0;
  /// The probe was in its place, driven and in the dark up to the end of the stage. Throws ProblemError where the run
  /// cannot go on.
  virtual void stage_done() = 0;
};

}  // namespace probewright::sequence
