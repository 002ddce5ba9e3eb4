#include "station/sequence/scan_text.h"

#include <algorithm>
#include <cctype>
#include <charconv>
#include <vector>

namespace probewright::sequence {
namespace {

constexpr std::size_t longest_scan = 64;
constexpr int largest_lot = 99999;
constexpr std::string_view card_mark = "LOT/";
constexpr const char* scan_place = "scan";

std::string_view trimmed(std::string_view text) {
  while (!text.empty() && std::isspace(static_cast<unsigned char>(text.front()))) text.remove_prefix(1);
  while (!text.empty() && std::isspace(static_cast<unsigned char>(text.back()))) text.remove_suffix(1);
  return text;
}

std::vector<std::string_view> parts_of(std::string_view text) {
  std::vector<std::string_view> parts;
  for (;;) {
    const auto slash = text.find('/');
    parts.push_back(text.substr(0, slash));
    if (slash == std::string_view::npos) return parts;
    text.remove_prefix(slash + 1);
  }
}

std::optional<int> whole_number(std::string_view text, int most) {
  int value = 0;
  const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), value);
  if (error != std::errc{} || end != text.data() + text.size() || value < 1 || value > most) return std::nullopt;
  return value;
}

std::size_t last_digits(std::string_view serial) {
  std::size_t digits = 0;
  while (digits < serial.size() && std::isdigit(static_cast<unsigned char>(serial[serial.size() - 1 - digits])))
    ++digits;
  return digits;
}

bool plain_lot_name(std::string_view name) {
  return !name.empty() && name.size() <= 20 && std::all_of(name.begin(), name.end(), [](unsigned char c) {
    return std::isalnum(c) || c == '-' || c == '_' || c == '.';
  });
}

Problem malformed(std::string_view why) { return {"lot_card_malformed", scan_place, {{"why", std::string{why}}}}; }

/// "nest 3" in any case; nothing when the text is something else.
std::optional<int> chosen_nest(std::string_view text) {
  constexpr std::string_view word = "nest";
  if (text.size() <= word.size()) return std::nullopt;
  for (std::size_t i = 0; i < word.size(); ++i)
    if (std::tolower(static_cast<unsigned char>(text[i])) != word[i]) return std::nullopt;
  return whole_number(trimmed(text.substr(word.size())), 99);
}

}  // namespace

bool LotCard::holds(std::string_view serial) const {
  return serial.size() == first_serial.size() && serial >= first_serial && serial <= last_serial;
}

std::optional<std::string> serial_after(std::string_view serial, int steps) {
  const std::size_t digits = std::min<std::size_t>(last_digits(serial), 9);
  if (digits == 0) return std::nullopt;
  const std::string_view head = serial.substr(0, serial.size() - digits);
  const auto number = whole_number("1" + std::string{serial.substr(head.size())}, 1'999'999'999);
  std::string counted = std::to_string(static_cast<long long>(*number) + steps);
  if (counted.size() != digits + 1 || counted.front() != '1') return std::nullopt;
  return std::string{head} + counted.substr(1);
}

Result<LotCard> read_lot_card(std::string_view text, const Configuration& configuration) {
  if (!text.starts_with(card_mark)) return malformed("it does not begin with LOT/");
  const auto parts = parts_of(text.substr(card_mark.size()));
  if (parts.size() != 4) return malformed("it has " + std::to_string(parts.size()) + " parts after LOT/ instead of 4");
  LotCard card{std::string{parts[0]}, std::string{parts[1]}, 0, std::string{parts[3]}, {}};
  if (!plain_lot_name(card.lot)) return malformed("the lot's name is not 1 to 20 letters, digits, - _ or .");
  const auto quantity = whole_number(parts[2], largest_lot);
  if (!quantity) return malformed("the quantity is not a whole number from 1 to " + std::to_string(largest_lot));
  card.quantity = *quantity;
  if (configuration.models.find(card.model) == configuration.models.end())
    return Problem{"lot_card_model", scan_place, {{"model", card.model}}};
  const auto last = serial_after(card.first_serial, card.quantity - 1);
  if (!last) return malformed("the serials cannot be counted up from " + card.first_serial);
  card.last_serial = *last;
  for (const std::string& serial : {card.first_serial, card.last_serial}) {
    const auto* model = configuration.model_of(serial);
    if (!model || model->value.name != card.model)
      return Problem{"lot_card_serial", scan_place, {{"serial", serial}, {"model", card.model}}};
  }
  return card;
}

Result<ScanMeaning> meaning_of_scan(std::string_view text, const Configuration& configuration) {
  text = trimmed(text);
  if (text.empty()) return Problem{"scan_empty", scan_place};
  if (text.size() > longest_scan)
    return Problem{"scan_too_long", scan_place, {{"bound", std::to_string(longest_scan)}}};
  if (!std::all_of(text.begin(), text.end(), [](char c) { return c >= ' ' && c <= '~'; }))
    return Problem{"scan_control", scan_place};
  if (configuration.people)
    if (const Person* person = configuration.people->value.by_badge(text)) return ScanMeaning{*person};
  if (text.starts_with(card_mark)) {
    auto card = read_lot_card(text, configuration);
    if (!card) return card.error();
    return ScanMeaning{*std::move(card)};
  }
  if (const auto nest = chosen_nest(text)) {
    const auto& places = configuration.station.value.nests;
    if (std::none_of(places.begin(), places.end(), [&](const NestPlace& place) { return place.nest == *nest; }))
      return Problem{"nest_not_there", scan_place, {{"nest", std::to_string(*nest)}}};
    return ScanMeaning{NestChoice{*nest}};
  }
  if (configuration.model_of(text)) return ScanMeaning{SerialScan{std::string{text}}};
  return Problem{"scan_unknown", scan_place};
}

}  // namespace probewright::sequence
