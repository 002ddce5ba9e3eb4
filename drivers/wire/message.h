#pragma once
#include <cstddef>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "station/base/digest.h"
#include "station/base/result.h"

namespace probewright::wire {

/// Syntax of program and response messages after IEEE 488.2 with headers in the style of SCPI-1999. Syntax alone: which
/// commands there are is the business of each end.

/// One piece of data of a message.
struct Datum {
  enum class Kind { number, word, text, block };
  Kind kind = Kind::word;
  std::string as_written;  ///< without white space around it
  double number = 0.0;     ///< number: its value, before the suffix
  std::string suffix;      ///< number: its unit as written, or empty
  std::string text;        ///< text: without quotes, doubled quotes undone; word: the word in upper case
  Bytes bytes;             ///< block: its content
};

/// One unit of a program message: `MOD:RATE 5` or `*IDN?`.
struct Unit {
  /// Keywords as written, with the branch of the unit before where the header began without a colon.
  /// A common command is one keyword that begins with '*'.
  std::vector<std::string> header;
  bool query = false;
  std::vector<Datum> data;
};

/// What is wrong with a message, in the numbers and words of SCPI-1999.
struct SyntaxFault {
  int number = 0;          ///< e.g. -102
  std::string_view words;  ///< e.g. "Syntax error"
  std::size_t at = 0;      ///< offset into the message
};

struct Message {
  std::vector<Unit> units;           ///< all, or those before the fault
  std::optional<SyntaxFault> fault;  ///< the first; nothing behind it was read
};

/// Reads one program message (a line without LF). Never throws for what it reads. Faults: -101 invalid character,
/// -102 syntax error, -103 invalid separator, -112 program mnemonic too long (over 12), -120 numeric data error,
/// -123 exponent too large, -151 invalid string data, -161 invalid block data.
Message parse_message(std::string_view line);

/// Reads the data of one answer (no header): numbers, words, strings, blocks, separated by ','.
/// Errors: message_malformed (number, words, offset).
Result<std::vector<Datum>> parse_data(std::string_view text);

/// Splits at `separator` outside quotes and blocks: the answers of several queries at ';', or the fields of `*IDN?`
/// (whose spaces parse_data would refuse) at ','. White space around a piece stays. Always at least one piece.
std::vector<std::string_view> split_outside(std::string_view text, char separator);

/// Whether a keyword as written is the short form (the capitals and digits of `pattern`) or the long form of
/// "SYSTem", without regard to case. Nothing in between counts.
bool keyword_matches(std::string_view pattern, std::string_view written);

/// Whether a unit's header is "SYSTem:ERRor[:NEXT]?": keywords in brackets may be left out; the query mark must agree.
bool header_matches(std::string_view pattern, const Unit& unit);

/// A number of a Datum in `unit` ("S", "HZ", "M" ...), its suffix undone: with multipliers of IEEE 488.2 (EX PE T G MA
/// K M U N P F A), where M before HZ and OHM means mega. Without suffix the number is meant in `unit`; an empty `unit`
/// allows no suffix. Errors: message_malformed with -104 when it is no number, -131 for another suffix.
Result<double> number_in(const Datum& datum, std::string_view unit);

/// `text` as a string of a message: in double quotes, quotes inside doubled.
std::string quoted(std::string_view text);

/// The fault as a Problem: message_malformed.
Problem to_problem(const SyntaxFault& fault);

}  // namespace probewright::wire
