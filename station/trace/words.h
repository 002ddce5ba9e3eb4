#pragma once
#include <optional>
#include <string>
#include <string_view>

#include "db/queries/entries.h"
#include "db/queries/run_record.h"
#include "db/rows.h"

// What the ledger holds, in words for people: the same on the terminal and on pages. Numbers by std::to_chars.
namespace probewright::trace {

/// "red centroid wavelength" of "red_centroid"; a slug that the catalogue lacks stays as it is.
std::string shown_as(std::string_view check);

/// One reading in words; empty where there is nothing to say.
struct ReadingWords {
  std::string check;     ///< "dark current"
  std::string value;     ///< enough decimals that it never looks like a limit that it is not; "yes", "no"
  std::string expanded;  ///< U, k = 2
  std::string unit;      ///< "nA"; empty for a bare number and yes/no
  std::string limits;    ///< "655.0 to 665.0", "up to 5"
  std::string accepted;  ///< the same for the acceptance limits, where they differ
  std::string margin;
  std::string state;  ///< "ok", "OUTSIDE the limit", "NO READING: blocked by dark current", "recorded" ...
};
ReadingWords words_of(const db::ReadingRow& reading);
/// "0.25"; with more decimals where two would make it look like 0.
std::string margin_words(double margin);

/// What must be said of a run that is no production evidence: "DEMONSTRATION, made on an emulated bench; TRAINING, no
/// production run"; empty for real production.
std::string standing_in_words(const db::RunOpened& opened);

/// "PASS", "FAIL (provisional)", "OPEN, no verdict"
std::string verdict_words(const std::optional<db::ClosingRecord>& closing);
/// Why a run ended as it did: the cause and the failing checks, without the likely cause.
std::string cause_words(std::string_view cause, std::string_view told, const std::vector<std::string>& failing);
/// "phantom: PH-01, firmware 1.0.0, certificate PHC-2026-0101"
std::string device_words(const db::RunDevice& device);
/// "AQ-20, revision 4 (SHA-256 0123456789ab...)"
std::string document_words(const db::NamedDocument& document);

/// What an entry says, in one line: "pass label of run 12, copy 2: smudged", "Imre Vasko as operator". Kinds that this
/// program does not know are told by their texts and numbers.
std::string entry_words(const db::EntryRecord& entry);

}  // namespace probewright::trace
