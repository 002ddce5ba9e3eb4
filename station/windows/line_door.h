#pragma once
#include <memory>
#include <vector>

#include "station/sequence/ledger_start.h"
#include "station/sequence/line_view.h"

namespace probewright::windows {

/// The line as the windows see it. LineHost stands behind it in the program.
class LineDoor {
 public:
  virtual ~LineDoor() = default;
  virtual void request(sequence::LineRequest request) = 0;
  /// Never null.
  virtual std::shared_ptr<const sequence::LineView> view() const = 0;
  /// Runs that this start closed because an earlier one had not.
  virtual std::vector<sequence::ClosedLate> closed_late() const = 0;
};

}  // namespace probewright::windows
