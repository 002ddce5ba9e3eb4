#pragma once
#include <optional>
#include <span>

#include "db/queries/tries.h"
#include "limits/sheet.h"
#include "station/base/problem.h"

namespace probewright::sequence {

/// Who asks for a try, and when.
struct TryAsked {
  std::string serial;
  UtcTime now;
  bool by_engineer = false;
  double speed = 1.0;  ///< of the emulated bench: a rest time passes that much faster
};

/// Why a serial may not have another production run: it passed, its tries are used up (a void uses one up), it has not
/// rested long enough since the last, or two voids want an engineer. Nothing: it may.
/// `runs` are all production runs of the serial, oldest first; those of an engineer after voids count like others.
/// Problems: serial_passed, serial_in_nest (a run is still open), serial_tries_used, serial_rests,
/// serial_voided_twice.
std::optional<Problem> not_another_try(std::span<const db::Try> runs, const limits::Retest& retest,
                                       const TryAsked& asked);

}  // namespace probewright::sequence
