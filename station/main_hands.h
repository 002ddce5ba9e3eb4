#pragma once
#include <optional>

#include "station/text/line.h"
#include "station/text/test.h"

namespace probewright {

/// The hands of an emulated bench, over its control socket. Wanted, they are there whether or not a bench answers (it
/// is then said at the first seating); left open, only where the socket is; refused, never.
std::optional<text::BenchHands> bench_hands(const text::TestOptions& options);
/// The same for a line, only where they are wanted.
std::optional<text::BenchHands> bench_hands(const text::LineOptions& options);

}  // namespace probewright
