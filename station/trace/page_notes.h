#pragma once
#include <string>

#include "station/base/times.h"
#include "station/base/zone.h"

namespace probewright::trace {

/// What every report on a ledger says of its making.
struct PageNotes {
  Zone zone;  ///< of the plant: every time on a page is told in it
  UtcTime printed;
  std::string verify_command;  ///< what a reader types to compare ledger and seal
  std::string cautions;        ///< what whoever relies on the page must know; paragraphs end with a line feed
};

}  // namespace probewright::trace
