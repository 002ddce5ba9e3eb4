#pragma once
#include <cstdint>
#include <functional>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "station/sequence/production/operator_thread.h"
#include "station/sequence/station_file.h"
#include "station/text/choices.h"
#include "station/text/console.h"
#include "station/text/line_window.h"
#include "station/text/page_maker.h"

namespace probewright::text {

struct DemoOptions {
  StationChoice choice;
  Build build;
  std::string program = "probewright";  ///< as it was started, for the commands that are told at the end
  bool headless = false;                ///< in text, even where a window could be opened
  int probes = 48;
  int nests = 4;
  double speed = 1.0;
  std::uint64_t seed = 1;
  double mistakes = 0.0;  ///< share of the probes with which the operator makes a mistake, 0 to 1
  std::string out;        ///< folder for everything; empty: a new one below $XDG_STATE_HOME/probewright
};

/// What this layer does not know: the emulated bench and the pages. Made by main.
struct DemoParts {
  std::vector<sequence::NestPlace> nests;        ///< ports and certificates of the bench's nests
  std::vector<sequence::production::Piece> lot;  ///< the probes, with what is planted in them
  std::string lot_name, lot_card, badge;         ///< what the operator scans
  std::string truth;                             ///< text of the truth file
  /// Starts the bench with its ports in this folder.
  std::function<Result<std::unique_ptr<sequence::production::ProbeHandler>>(const std::string& ports)> start_bench;
  /// The device floor of a run that has just ended, in device seconds; nothing where something had to be asked again or
  /// the run did not go through. Empty: nobody measures it.
  std::function<std::optional<double>(const sequence::RunOutcome& outcome)> device_floor_s;
  /// Where the line is shown while the lot is worked through; nullptr: in text.
  LineWindow* window = nullptr;
  PageMaker* pages = nullptr;  ///< draws labels and report; nullptr: this program was built without pages
};

/// `demo`: a lot of probes with planted faults on an emulated bench, worked through by an emulated operator, with
/// ledger, labels and shift report in one folder. Exit status: 0 the lot was worked through, 2 refused, 3 it could not
/// be.
int demo(const DemoOptions& options, const DemoParts& parts, Console& console);

/// Why no demonstration can be like that (usage_out_of_range); nothing: it can. Ask it before
/// making parts.
std::optional<Problem> impossible(const DemoOptions& options);

}  // namespace probewright::text
