#pragma once
#include <optional>
#include <string>
#include <vector>

#include "limits/diagnosis/rules.h"
#include "station/base/strict_yaml.h"

// The parts of the reader of diagnosis rules. Every part tells `faults` what is wrong and goes on; what it returns is
// only used when there was no fault at all.
namespace probewright::limits::diagnosis::reader {

using yaml::Faults;
using yaml::Map;
using yaml::Value;

/// What a cause may name.
struct Names {
  std::vector<std::string> checks, stages, causes;
};

/// The cause under `item`, whose names must be among `names`.
Cause read_cause(const Map::Item& item, const Names& names, double within, Faults& faults);

/// "+1.3", "-0.5 within 10 %", "above 8", "below -8", "no reading", "no reading (too_dark)", or a list of these.
/// `within` holds where none is written. Error: rules_expected.
std::vector<Expected> read_expected(const Value& value, double within, Faults& faults);
/// One of these; nothing where it is none.
std::optional<Expected> parse_expected(std::string_view text, double within);

/// A word of `known`, or nothing with the fault `id` (arguments text and hint).
std::optional<std::string> known_word(const Value& value, const std::vector<std::string>& known, std::string_view id,
                                      Faults& faults);
/// A list of such words; a single one needs no brackets.
std::vector<std::string> known_words(const Value& value, const std::vector<std::string>& known, std::string_view id,
                                     Faults& faults);
/// A text with something in it. Errors: rules_empty_text.
std::string need_text(Map& map, std::string_view key, Faults& faults);
/// A number between two bounds. Errors: rules_out_of_range.
double bounded(const Value& value, std::string_view key, double least, double most, Faults& faults);
/// "0.3 %" as 0.003, above 0 and at most 100 %. Errors: rules_out_of_range.
double share(const Value& value, std::string_view key, Faults& faults);
/// "did you mean ..." of the nearest word, or all of them when they are few.
std::string hint(std::string_view word, const std::vector<std::string>& words);
/// Lower-case letters, digits and underscores, a letter first.
bool is_slug(std::string_view text);

}  // namespace probewright::limits::diagnosis::reader
