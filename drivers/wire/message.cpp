#include "drivers/wire/message.h"

#include <array>
#include <charconv>
#include <cmath>

#include "drivers/wire/block.h"

namespace probewright::wire {
namespace {

constexpr std::size_t longest_mnemonic = 12;  // IEEE 488.2, 7.6.1.4.1

bool is_digit(char c) { return c >= '0' && c <= '9'; }
bool is_letter(char c) { return (c >= 'A' && c <= 'Z') || (c >= 'a' && c <= 'z'); }
bool is_word(char c) { return is_letter(c) || is_digit(c) || c == '_'; }
char upper(char c) { return c >= 'a' && c <= 'z' ? static_cast<char>(c - 'a' + 'A') : c; }
/// White space of IEEE 488.2: every code up to the space, LF aside (it ends the message and never gets here).
bool is_space(char c) { return static_cast<unsigned char>(c) <= 0x20; }

std::string upper(std::string_view text) {
  std::string result{text};
  for (char& c : result) c = upper(c);
  return result;
}

bool equal_letters(std::string_view a, std::string_view b) { return upper(a) == upper(b); }

std::string_view words_of(int number) {
  switch (number) {
    case -101:
      return "Invalid character";
    case -103:
      return "Invalid separator";
    case -104:
      return "Data type error";
    case -112:
      return "Program mnemonic too long";
    case -120:
      return "Numeric data error";
    case -123:
      return "Exponent too large";
    case -131:
      return "Invalid suffix";
    case -151:
      return "Invalid string data";
    case -161:
      return "Invalid block data";
    default:
      return "Syntax error";
  }
}

/// Reads from front to back; the first fault ends everything.
class Cursor {
 public:
  explicit Cursor(std::string_view text) : text_(text) {}
  bool done() const { return at_ >= text_.size(); }
  char peek() const { return done() ? '\0' : text_[at_]; }
  bool next_is(char c) const { return !done() && text_[at_] == c; }
  bool skip(char c) {
    const bool there = next_is(c);
    if (there) ++at_;
    return there;
  }
  bool skip_space() {
    const auto before = at_;
    while (!done() && is_space(text_[at_])) ++at_;
    return at_ != before;
  }
  template <class Test>
  std::string_view while_true(Test test) {
    const auto from = at_;
    while (!done() && test(text_[at_])) ++at_;
    return text_.substr(from, at_ - from);
  }
  std::string_view rest() const { return text_.substr(at_); }
  std::string_view since(std::size_t from) const { return text_.substr(from, at_ - from); }
  std::size_t at() const { return at_; }
  void jump(std::size_t count) { at_ += count; }
  bool fail(int number) {
    if (!fault_) fault_ = SyntaxFault{number, words_of(number), at_};
    return false;
  }
  const std::optional<SyntaxFault>& fault() const { return fault_; }

 private:
  std::string_view text_;
  std::size_t at_ = 0;
  std::optional<SyntaxFault> fault_;
};

bool read_number(Cursor& cursor, Datum& datum) {
  const auto rest = cursor.rest();
  const std::size_t sign = rest.front() == '+' || rest.front() == '-' ? 1 : 0;
  // from_chars would take "inf" and "nan", and a second sign; the standard's numbers begin with a digit or a point.
  if (rest.size() == sign || (!is_digit(rest[sign]) && rest[sign] != '.')) return cursor.fail(-120);
  const auto digits = rest.substr(sign);
  const auto [end, error] = std::from_chars(digits.data(), digits.data() + digits.size(), datum.number);
  if (error == std::errc::result_out_of_range) return cursor.fail(-123);
  if (error != std::errc{}) return cursor.fail(-120);
  if (rest.front() == '-') datum.number = -datum.number;
  cursor.jump(sign + static_cast<std::size_t>(end - digits.data()));
  datum.kind = Datum::Kind::number;
  return true;
}

void read_suffix(Cursor& cursor, Datum& datum) {
  Cursor ahead = cursor;
  ahead.skip_space();
  if (!is_letter(ahead.peek()) && ahead.peek() != '/') return;
  cursor = ahead;
  datum.suffix =
      cursor.while_true([](char c) { return is_letter(c) || is_digit(c) || c == '/' || c == '.' || c == '-'; });
}

bool read_string(Cursor& cursor, Datum& datum) {
  const char quote = cursor.peek();
  cursor.jump(1);
  datum.kind = Datum::Kind::text;
  while (true) {
    datum.text += cursor.while_true([quote](char c) { return c != quote; });
    if (!cursor.skip(quote)) return cursor.fail(-151);
    if (!cursor.next_is(quote)) return true;
    datum.text += quote;
    cursor.jump(1);
  }
}

bool read_other_base(Cursor& cursor, Datum& datum) {
  const char letter = upper(cursor.rest().size() > 1 ? cursor.rest()[1] : '\0');
  const int base = letter == 'H' ? 16 : letter == 'Q' ? 8 : letter == 'B' ? 2 : 0;
  if (base == 0) return cursor.fail(-161);
  const auto digits = cursor.rest().substr(2);
  unsigned long long value = 0;
  const auto [end, error] = std::from_chars(digits.data(), digits.data() + digits.size(), value, base);
  if (error != std::errc{}) return cursor.fail(-120);
  cursor.jump(2 + static_cast<std::size_t>(end - digits.data()));
  datum.kind = Datum::Kind::number;
  datum.number = static_cast<double>(value);
  return true;
}

bool read_hash(Cursor& cursor, Datum& datum) {
  if (cursor.rest().size() < 2 || !is_digit(cursor.rest()[1])) return read_other_base(cursor, datum);
  auto block = decode_block(cursor.rest());
  if (!block) return cursor.fail(-161);
  cursor.jump(block->length);
  datum.kind = Datum::Kind::block;
  datum.bytes = std::move(block->bytes);
  return true;
}

bool read_datum_content(Cursor& cursor, Datum& datum) {
  const char c = cursor.peek();
  if (c == '"' || c == '\'') return read_string(cursor, datum);
  if (c == '#') return read_hash(cursor, datum);
  if (is_letter(c)) {
    datum.kind = Datum::Kind::word;
    datum.text = upper(cursor.while_true(is_word));
    return true;
  }
  if (!is_digit(c) && c != '+' && c != '-' && c != '.')
    return cursor.fail(cursor.done() || c == ',' || c == ';' ? -102 : -101);
  if (!read_number(cursor, datum)) return false;
  read_suffix(cursor, datum);
  return true;
}

bool read_datum(Cursor& cursor, std::vector<Datum>& data) {
  cursor.skip_space();
  Datum datum;
  const auto from = cursor.at();
  if (!read_datum_content(cursor, datum)) return false;
  datum.as_written = cursor.since(from);
  cursor.skip_space();
  data.push_back(std::move(datum));
  return true;
}

/// Data up to `end` or the end of the text.
bool read_data(Cursor& cursor, std::vector<Datum>& data, char end) {
  do {
    if (!read_datum(cursor, data)) return false;
  } while (cursor.skip(','));
  return cursor.done() || cursor.next_is(end) || cursor.fail(-103);
}

bool read_keyword(Cursor& cursor, std::string& keyword) {
  if (!is_letter(cursor.peek())) return cursor.fail(cursor.done() || cursor.next_is(';') ? -102 : -101);
  const auto word = cursor.while_true(is_word);
  if (word.size() > longest_mnemonic) return cursor.fail(-112);
  keyword += word;
  return true;
}

/// `branch` is what stands before the last keyword of the unit before; it is moved on here.
bool read_header(Cursor& cursor, Unit& unit, std::vector<std::string>& branch) {
  if (cursor.skip('*')) {
    unit.header.emplace_back("*");
    return read_keyword(cursor, unit.header.back());
  }
  if (!cursor.skip(':')) unit.header = branch;
  do {
    unit.header.emplace_back();
    if (!read_keyword(cursor, unit.header.back())) return false;
  } while (cursor.skip(':'));
  branch.assign(unit.header.begin(), unit.header.end() - 1);
  return true;
}

bool read_unit(Cursor& cursor, Unit& unit, std::vector<std::string>& branch) {
  cursor.skip_space();
  if (!read_header(cursor, unit, branch)) return false;
  unit.query = cursor.skip('?');
  const bool space = cursor.skip_space();
  if (cursor.done() || cursor.next_is(';')) return true;
  if (!space) return cursor.fail(-102);
  return read_data(cursor, unit.data, ';');
}

struct Multiplier {
  std::string_view prefix;
  double times, per;  // "20 ms" is 20 / 1000: one correct rounding, where 20 * 0.001 would have two
};

// IEEE 488.2, table 7-2.
constexpr std::array multipliers = std::to_array<Multiplier>({{"EX", 1e18, 1.0},
                                                              {"PE", 1e15, 1.0},
                                                              {"T", 1e12, 1.0},
                                                              {"G", 1e9, 1.0},
                                                              {"MA", 1e6, 1.0},
                                                              {"K", 1e3, 1.0},
                                                              {"M", 1.0, 1e3},
                                                              {"U", 1.0, 1e6},
                                                              {"N", 1.0, 1e9},
                                                              {"P", 1.0, 1e12},
                                                              {"F", 1.0, 1e15},
                                                              {"A", 1.0, 1e18}});
constexpr Multiplier mega{"M", 1e6, 1.0};
constexpr Multiplier one{"", 1.0, 1.0};

std::optional<Multiplier> multiplier_of(std::string_view suffix, std::string_view unit) {
  if (suffix.empty() || suffix == unit) return one;
  if (unit.empty() || !suffix.ends_with(unit)) return std::nullopt;
  const auto prefix = suffix.substr(0, suffix.size() - unit.size());
  if (prefix == "M" && (unit == "HZ" || unit == "OHM")) return mega;
  for (const auto& multiplier : multipliers)
    if (multiplier.prefix == prefix) return multiplier;
  return std::nullopt;
}

/// `pattern` and `keywords` from their fronts on; brackets hold whole keywords with their colon: "[:NEXT]".
bool match_from(std::string_view pattern, const std::vector<std::string>& keywords, std::size_t index) {
  if (pattern.empty()) return index == keywords.size();
  if (pattern.front() == '[') {
    const auto close = pattern.find(']');
    const auto inside = pattern.substr(1, close - 1);
    const auto after = pattern.substr(close + 1);
    return match_from(std::string{inside}.append(after), keywords, index) || match_from(after, keywords, index);
  }
  if (pattern.front() == ':') pattern.remove_prefix(1);
  const auto keyword = pattern.substr(0, pattern.find_first_of(":["));
  if (index == keywords.size() || !keyword_matches(keyword, keywords[index])) return false;
  return match_from(pattern.substr(keyword.size()), keywords, index + 1);
}

/// Where the quoted or block piece that begins at `at` ends, else `at` + 1.
std::size_t behind_piece(std::string_view text, std::size_t at) {
  const char c = text[at];
  if (c == '"' || c == '\'') {
    const auto close = text.find(c, at + 1);  // a doubled quote opens the next piece at once
    return close == std::string_view::npos ? text.size() : close + 1;
  }
  if (c == '#')
    if (const auto block = decode_block(text.substr(at))) return at + block->length;
  return at + 1;
}

}  // namespace

Message parse_message(std::string_view line) {
  Message message;
  Cursor cursor{line};
  std::vector<std::string> branch;
  cursor.skip_space();
  if (cursor.done()) return message;
  do {
    Unit unit;
    if (!read_unit(cursor, unit, branch)) break;
    message.units.push_back(std::move(unit));
  } while (cursor.skip(';'));
  message.fault = cursor.fault();
  return message;
}

Result<std::vector<Datum>> parse_data(std::string_view text) {
  Cursor cursor{text};
  std::vector<Datum> data;
  if (read_data(cursor, data, '\0')) return data;
  return to_problem(*cursor.fault());
}

std::vector<std::string_view> split_outside(std::string_view text, char separator) {
  std::vector<std::string_view> pieces;
  std::size_t from = 0;
  for (std::size_t at = 0; at < text.size();) {
    if (text[at] == separator) {
      pieces.push_back(text.substr(from, at - from));
      from = ++at;
    } else {
      at = behind_piece(text, at);
    }
  }
  pieces.push_back(text.substr(from));
  return pieces;
}

bool keyword_matches(std::string_view pattern, std::string_view written) {
  std::string short_form;
  for (const char c : pattern)
    if (c == upper(c)) short_form += c;
  return equal_letters(written, short_form) || equal_letters(written, pattern);
}

bool header_matches(std::string_view pattern, const Unit& unit) {
  const bool query = pattern.ends_with('?');
  if (query) pattern.remove_suffix(1);
  return query == unit.query && match_from(pattern, unit.header, 0);
}

Result<double> number_in(const Datum& datum, std::string_view unit) {
  if (datum.kind != Datum::Kind::number) return to_problem({-104, words_of(-104), 0});
  const auto multiplier = multiplier_of(upper(datum.suffix), upper(unit));
  if (!multiplier) return to_problem({-131, words_of(-131), 0});
  return datum.number * multiplier->times / multiplier->per;
}

std::string quoted(std::string_view text) {
  std::string result = "\"";
  for (const char c : text) {
    if (c == '"') result += c;
    result += c;
  }
  return result += '"';
}

Problem to_problem(const SyntaxFault& fault) {
  return Problem{"message_malformed",
                 "",
                 {{"number", std::to_string(fault.number)},
                  {"words", std::string{fault.words}},
                  {"offset", std::to_string(fault.at)}}};
}

}  // namespace probewright::wire
