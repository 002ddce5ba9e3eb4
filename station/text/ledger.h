#pragma once
#include <cstdint>
#include <optional>
#include <string>

#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

struct LedgerVerifyOptions {
  std::string file;
  std::string seal;                   ///< 64 hexadecimal digits of a printed seal; empty: none to compare with
  std::optional<std::int64_t> entry;  ///< the entry that the seal was printed for; needed with it
};
/// `ledger verify`: walks everything and names the first place that does not agree.
/// Exit status: 0 all agrees, 1 something does not, 2 no ledger there, 3 it cannot be read.
int ledger_verify(const LedgerVerifyOptions& options, Console& console);

struct LedgerSealOptions {
  StationChoice choice;
  std::string file;  ///< empty: the station's ledger
};
/// `ledger seal`: number and hash of the newest entry. Exit status: 0, 2 no ledger there, 3 it cannot be read.
int ledger_seal(const LedgerSealOptions& options, Console& console);

}  // namespace probewright::text
