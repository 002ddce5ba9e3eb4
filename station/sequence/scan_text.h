#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <variant>

#include "station/base/result.h"
#include "station/sequence/configuration.h"

namespace probewright::sequence {

/// A card that opens a lot: "LOT/AQ20-W48-07/AQ-20/48/AQ20-048-00001": name, model, how many, first serial. The serials
/// of the lot are that many, counted up from the first one's last digits.
struct LotCard {
  std::string lot, model;
  int quantity = 0;
  std::string first_serial, last_serial;

  /// Whether a serial is one of the lot's.
  bool holds(std::string_view serial) const;
  bool operator==(const LotCard&) const = default;
};
/// The serial that stands `steps` after this one: its last digits counted up, in their width. Nothing when it does not
/// end in digits or they overflow.
std::optional<std::string> serial_after(std::string_view serial, int steps);
/// Reads a lot card. Errors: lot_card_malformed (with what is wrong), lot_card_model (no such model),
/// lot_card_serial (the first or last serial does not fit the model's pattern).
Result<LotCard> read_lot_card(std::string_view text, const Configuration& configuration);

/// "nest 3": the next serial is for this nest.
struct NestChoice {
  int nest = 0;
};
struct SerialScan {
  std::string serial;
};
using ScanMeaning = std::variant<Person, LotCard, NestChoice, SerialScan>;

/// What a scanned or typed text means. Blanks around it do not count.
/// Errors: scan_empty, scan_too_long (64 characters at most), scan_control (bytes that are no printable ASCII),
/// those of read_lot_card, nest_not_there, scan_unknown (neither a serial of a model nor anything else that is known;
/// nothing that could be a badge is repeated).
Result<ScanMeaning> meaning_of_scan(std::string_view text, const Configuration& configuration);

}  // namespace probewright::sequence
