#pragma once
#include <functional>
#include <memory>
#include <string>

#include "drivers/wire/line_clock.h"
#include "drivers/wire/link.h"
#include "station/base/entropy.h"
#include "station/base/zone.h"
#include "station/sequence/ledger_writer.h"
#include "station/sequence/line_types.h"
#include "station/sequence/line_view.h"
#include "station/sequence/station_file.h"

namespace probewright::sequence {

/// What was built, for every run's record.
struct Software {
  std::string version, commit, compiler;
};

/// What the line stands on; all of it outlives the line.
struct LineServices {
  wire::LineClock& clock;
  Entropy& entropy;
  LedgerWriter& ledger;
  Software software;
  Zone zone;                                   ///< certificates end by the plant's day
  std::function<void(const LineEvent&)> tell;  ///< line thread; must not block
  /// Takes each new view: line thread, must not block. Empty: none is made.
  std::function<void(std::shared_ptr<const LineView>)> show{};
  double views_per_s = 30.0;
};

enum class DeviceKind { phantom, adapter };
/// Gives the source that opens a device's port, now and after each loss.
using PortOpener = std::function<wire::PortSource(const DevicePlace& place, int nest, DeviceKind kind)>;

}  // namespace probewright::sequence
