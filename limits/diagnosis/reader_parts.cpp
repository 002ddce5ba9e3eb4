#include "limits/diagnosis/reader_parts.h"

#include <algorithm>

#include "limits/words.h"
#include "station/base/numbers.h"

namespace probewright::limits::diagnosis::reader {
namespace {

std::string as_written(const Value& value) {
  Faults unheard{""};
  return value.is_scalar() ? value.text(unheard).value_or("") : std::string{};
}

/// All digits, without an exponent.
std::string plain(double value) { return fixed(value, decimals_of(value)); }

double in_range(const Value& value, std::string_view key, std::optional<double> number, double least, double most,
                Faults& faults) {
  if (!number) return most;
  if (*number >= least && *number <= most) return *number;
  faults.add(value.place(), "rules_out_of_range",
             {{"key", std::string{key}}, {"text", as_written(value)}, {"from", plain(least)}, {"to", plain(most)}});
  return most;
}

}  // namespace

std::string hint(std::string_view word, const std::vector<std::string>& words) {
  if (const std::string nearest = yaml::nearest_word(word, words); !nearest.empty())
    return "did you mean \"" + nearest + "\"?";
  constexpr std::size_t few = 12;
  if (words.empty() || words.size() > few) return "look at the names in this document and in the list of checks";
  std::string all = "one of: ";
  for (const std::string& one : words) all += (&one == &words.front() ? "" : ", ") + one;
  return all;
}

bool is_slug(std::string_view text) {
  const auto letter = [](char c) { return c >= 'a' && c <= 'z'; };
  const auto in_slug = [&](char c) { return letter(c) || (c >= '0' && c <= '9') || c == '_'; };
  return !text.empty() && letter(text.front()) && std::all_of(text.begin(), text.end(), in_slug);
}

std::optional<std::string> known_word(const Value& value, const std::vector<std::string>& known, std::string_view id,
                                      Faults& faults) {
  const auto text = value.text(faults);
  if (!text) return {};
  if (std::find(known.begin(), known.end(), *text) != known.end()) return text;
  faults.add(value.place(), id, {{"text", *text}, {"hint", hint(*text, known)}});
  return {};
}

std::vector<std::string> known_words(const Value& value, const std::vector<std::string>& known, std::string_view id,
                                     Faults& faults) {
  std::vector<std::string> words;
  const auto take = [&](const Value& one) {
    if (auto word = known_word(one, known, id, faults)) words.push_back(*std::move(word));
  };
  if (!value.is_list()) return take(value), words;
  if (const auto list = value.list(faults))
    for (const Value& one : list->items()) take(one);
  return words;
}

std::string need_text(Map& map, std::string_view key, Faults& faults) {
  const auto value = map.need(key, faults);
  const auto text = value ? value->text(faults) : std::nullopt;
  if (text && text->find_first_not_of(" \t\n") == std::string::npos)
    faults.add(value->place(), "rules_empty_text", {{"key", std::string{key}}});
  return text.value_or("");
}

double bounded(const Value& value, std::string_view key, double least, double most, Faults& faults) {
  return in_range(value, key, value.number(faults), least, most, faults);
}

double share(const Value& value, std::string_view key, Faults& faults) {
  constexpr double least_percent = 0.0001;
  return 0.01 * in_range(value, key, value.quantity("%", faults), least_percent, 100.0, faults);
}

}  // namespace probewright::limits::diagnosis::reader
