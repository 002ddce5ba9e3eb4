#pragma once
#include <optional>
#include <string>
#include <variant>

#include "station/sequence/line_types.h"
#include "station/text/choices.h"
#include "station/text/console.h"
#include "station/text/line_window.h"
#include "station/text/test.h"

namespace probewright::text {

struct LineOptions {
  StationChoice choice;
  Build build;
  bool text = false;            ///< in a terminal, even where a window could be opened
  std::string ledger;           ///< file; empty: the station file's
  std::string ports;            ///< folder for port names that are no full paths; empty: the station file's
  std::optional<double> speed;  ///< of the emulated bench; empty: the station file's
  bool hands = false;           ///< the emulated bench's hands put in what was scanned
  std::string control;          ///< their socket; empty: the bench's usual one
};

/// `line --text`: runs the station until it is left. What a scanner types, or a person, comes from standard input, one
/// line each: a scan, or one of the words of meaning_of_typed. On a terminal the berths are drawn and stay in place;
/// elsewhere each change is a line.
/// `hands`: who puts probes in and takes them out; nullptr: people.
/// Exit status: 0 left in order, 2 refused configuration, 3 the line could not start or ended by a mistake of ours.
/// `window`: where the line is shown instead, unless options.text; nullptr: there is none.
int line(const LineOptions& options, const BenchHands* hands, LineWindow* window, Console& console);

/// "quit": the line is left when all runs have ended.
struct Leave {};
using Typed = std::variant<sequence::LineRequest, Leave>;
/// "sign out", "close lot", "stop 3", "quit", in any case; anything else is a scan.
Typed meaning_of_typed(const std::string& text);

}  // namespace probewright::text
