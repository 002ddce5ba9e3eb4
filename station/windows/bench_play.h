#pragma once
#include <string>

#include "station/base/result.h"

namespace probewright::windows {

/// What somebody without a bench can do with an emulated one. The program fills it in; the windows know no bench. Main
/// thread only; each call waits for the bench's answer, a few milliseconds.
class BenchPlay {
 public:
  virtual ~BenchPlay() = default;

  /// What a badge and a lot card of the bench read like: scanned to begin with.
  virtual std::string badge() const = 0;
  virtual std::string lot_card() const = 0;
  /// The next serial of the lot that was not offered yet.
  virtual std::string next_serial() = 0;
  /// Puts the probe into the nest, as the hand does after a scan.
  virtual Result<void> seat(int nest, const std::string& serial) = 0;
  virtual Result<void> take_out(int nest) = 0;
};

}  // namespace probewright::windows
