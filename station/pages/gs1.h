#pragma once
#include <optional>
#include <string>
#include <string_view>

#include "station/base/result.h"

/// Element strings of the GS1 General Specifications, as far as a label needs them: AI 01, 10, 11 and 21.
/// Pure functions of text. Any thread.
namespace probewright::pages::gs1 {

/// Ends a field of variable length in what a reader sends: FNC1 in the symbol, ASCII 29 on the line.
inline constexpr char separator = '\x1d';
/// What a reader puts in front of a GS1 DataMatrix, if it is set to tell the symbology.
inline constexpr std::string_view data_matrix_identifier = "]d2";

/// The last digit of a GTIN or SSCC from those before it: weights 3, 1, 3, 1 ... from the right, up to the next ten
/// (GS1 General Specifications, "Check digit calculations"). Empty if `digits` is empty or holds anything but digits.
std::optional<char> check_digit(std::string_view digits);

/// A GTIN-8, 12, 13 or 14 as 14 digits, padded on the left with zeros.
/// Errors: gs1_gtin_length, gs1_gtin_digits, gs1_check_digit.
Result<std::string> gtin_14(std::string_view gtin);

/// Whether the GTIN (14 digits) carries the prefix 952, which GS1 keeps for demonstrations and examples (list of GS1
/// prefixes; from memory). Nothing on sale bears it.
bool is_example(std::string_view gtin_14_digits);

/// "2026-12-01" as the "261201" of AI 11. Errors: gs1_date (no such day).
Result<std::string> yymmdd(std::string_view day);

/// What a label says of one probe.
struct Elements {
  std::string gtin;             ///< AI 01, 14 digits
  std::string production_date;  ///< AI 11, YYMMDD; day 00: not told; empty: no such element
  std::string lot;              ///< AI 10, 1 to 20 characters of set 82; empty: no such element
  std::string serial;           ///< AI 21, likewise
  bool operator==(const Elements&) const = default;
};

/// Every fault that keeps `elements` off a label, the first found. Errors: as gtin_14; gs1_date, gs1_value, gs1_length.
std::optional<Problem> fault_of(const Elements& elements);

/// As a reader sends it, without symbology identifier: those of fixed length first (01, 11), then 10, then 21, so that
/// one separator is enough. Errors: as fault_of.
Result<std::string> element_string(const Elements& elements);

/// The same with each AI in the given brackets and no separators: round ones for people, square ones for the encoder.
/// Errors: as fault_of.
Result<std::string> bracketed(const Elements& elements, char open = '(', char close = ')');

/// What a reader sent, with or without its symbology identifier, elements in any order.
/// Errors: gs1_unknown_ai, gs1_twice, gs1_cut_short, gs1_no_gtin, gs1_no_serial, and those of fault_of.
Result<Elements> parse(std::string_view scanned);

}  // namespace probewright::pages::gs1
