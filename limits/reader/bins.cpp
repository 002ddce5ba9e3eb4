#include <algorithm>

#include "limits/e_series.h"
#include "limits/fixed_number.h"
#include "limits/reader/parts.h"
#include "station/base/numbers.h"

namespace probewright::limits::reader {
namespace {

struct PlacedBin {
  Bin bin;
  yaml::Place lower, resistor;
};

const CheckRule* find_rule(const std::vector<CheckRule>& rules, std::string_view check) {
  const auto found = std::find_if(rules.begin(), rules.end(), [&](const CheckRule& r) { return r.check == check; });
  return found == rules.end() ? nullptr : &*found;
}

class BinsReader {
 public:
  BinsReader(const ReadChecks& checks, Faults& faults, Faults& warnings)
      : checks_(checks), faults_(faults), warnings_(warnings) {}
  std::optional<Bins> read(const Value& value);

 private:
  bool read_by(const Value& value);
  void read_bin(const Map::Item& item);
  std::optional<double> take(Map& map, const char* key, std::string_view unit, yaml::Place* place = nullptr);
  void one_bin_sane(const PlacedBin& placed, yaml::Place nominal);
  void no_gap_no_overlap();
  void fill_the_window(yaml::Place place);
  void resistors_apart();
  std::string shown(double value) const { return with_unit(value, unit_); }

  const ReadChecks& checks_;
  Faults& faults_;
  Faults& warnings_;
  std::string by_;
  std::string_view unit_;
  const CheckRule* window_ = nullptr;  ///< rule of the sorting check; null when it has a fault of its own
  std::vector<PlacedBin> bins_;
  bool whole_ = true;
};

bool BinsReader::read_by(const Value& value) {
  by_ = value.text(faults_).value_or("");
  const Check* check = find_check(by_);
  std::vector<std::string> words;
  for (const CheckRule& rule : checks_.rules)
    if (rule.use == Use::judged && rule.limits.two_sided()) words.push_back(rule.check);
  window_ = find_rule(checks_.rules, by_);
  const bool named = std::find(checks_.named.begin(), checks_.named.end(), by_) != checks_.named.end();
  // A check that is named and has no rule has faults that were told already.
  const bool sorts = check && named && (!window_ || (window_->use == Use::judged && window_->limits.two_sided()));
  if (sorts)
    unit_ = check->unit;
  else
    faults_.add(value.place(), "sheet_bins_by", {{"text", by_}, {"hint", hint(by_, words, "name such a check")}});
  return sorts;
}

std::optional<double> BinsReader::take(Map& map, const char* key, std::string_view unit, yaml::Place* place) {
  const auto value = map.need(key, faults_);
  if (!value) return {};
  if (place) *place = value->place();
  return amount(*value, unit, faults_);
}

void BinsReader::one_bin_sane(const PlacedBin& placed, yaml::Place nominal) {
  const Bin& bin = placed.bin;
  if (!(bin.lower < bin.upper)) {
    whole_ = false;  // gaps and overlaps mean nothing beside it
    return faults_.add(placed.lower, "sheet_bin_reversed",
                       {{"bin", bin.name}, {"lower", shown(bin.lower)}, {"upper", shown(bin.upper)}});
  }
  if (bin.nominal < bin.lower || bin.nominal > bin.upper)
    faults_.add(nominal, "sheet_bin_nominal_outside", {{"bin", bin.name}, {"nominal", shown(bin.nominal)}});
  if (!(bin.resistor_ohm > 0.0))
    return faults_.add(placed.resistor, "sheet_not_above_zero",
                       {{"check", bin.name}, {"key", "id resistor"}, {"text", with_unit(bin.resistor_ohm, "ohm")}});
  if (!is_e96(bin.resistor_ohm))
    warnings_.add(placed.resistor, "sheet_resistor_not_e96",
                  {{"bin", bin.name}, {"resistor", with_unit(bin.resistor_ohm, "ohm")}});
}

void BinsReader::read_bin(const Map::Item& item) {
  auto map = item.value.map(faults_);
  if (!map) {
    whole_ = false;
    return;
  }
  PlacedBin placed;
  yaml::Place nominal_place;
  const auto lower = take(*map, "lower", unit_, &placed.lower);
  const auto upper = take(*map, "upper", unit_);
  const auto nominal = take(*map, "nominal", unit_, &nominal_place);
  const auto resistor_ohm = take(*map, "id resistor", "ohm", &placed.resistor);
  map->finish(faults_);
  if (!lower || !upper || !nominal || !resistor_ohm) {
    whole_ = false;
    return;
  }
  placed.bin = {item.key, *lower, *upper, *nominal, *resistor_ohm};
  one_bin_sane(placed, nominal_place);
  bins_.push_back(std::move(placed));
}

void BinsReader::no_gap_no_overlap() {
  for (std::size_t i = 1; i < bins_.size(); ++i) {
    const Bin &before = bins_[i - 1].bin, &bin = bins_[i].bin;
    if (bin.lower == before.upper) continue;
    faults_.add(bins_[i].lower, bin.lower > before.upper ? "sheet_bin_gap" : "sheet_bin_overlap",
                {{"bin", bin.name},
                 {"before", before.name},
                 {"from", shown(std::min(bin.lower, before.upper))},
                 {"to", shown(std::max(bin.lower, before.upper))}});
  }
}

void BinsReader::fill_the_window(yaml::Place place) {
  if (!window_) return;
  const double lower = bins_.front().bin.lower, upper = bins_.back().bin.upper;
  if (lower == *window_->limits.lower && upper == *window_->limits.upper) return;
  faults_.add(place, "sheet_bins_and_window",
              {{"check", by_},
               {"lower", shown(lower)},
               {"upper", shown(upper)},
               {"window_lower", shown(*window_->limits.lower)},
               {"window_upper", shown(*window_->limits.upper)}});
}

void BinsReader::resistors_apart() {
  std::vector<PlacedBin> rising = bins_;
  std::sort(rising.begin(), rising.end(),
            [](const PlacedBin& a, const PlacedBin& b) { return a.bin.resistor_ohm < b.bin.resistor_ohm; });
  for (std::size_t i = 1; i < rising.size(); ++i) {
    const Bin &smaller = rising[i - 1].bin, &larger = rising[i].bin;
    if (larger.resistor_ohm >= fixed_number(smaller.resistor_ohm * least_resistor_step)) continue;
    faults_.add(rising[i].resistor, "sheet_resistors_too_close",
                {{"bin", larger.name},
                 {"resistor", with_unit(larger.resistor_ohm, "ohm")},
                 {"other", smaller.name},
                 {"other_resistor", with_unit(smaller.resistor_ohm, "ohm")}});
  }
}

std::optional<Bins> BinsReader::read(const Value& value) {
  auto map = value.map(faults_);
  if (!map) return {};
  const auto by = map->need("by", faults_);
  if (!by || !read_by(*by)) return {};
  for (const Map::Item& item : map->items())
    if (item.key != "by") read_bin(item);
  if (bins_.empty() && whole_) faults_.add(value.place(), "sheet_no_bins");
  if (bins_.empty() || !whole_) return {};
  std::stable_sort(bins_.begin(), bins_.end(),
                   [](const PlacedBin& a, const PlacedBin& b) { return a.bin.lower < b.bin.lower; });
  no_gap_no_overlap();
  fill_the_window(value.place());
  resistors_apart();
  Bins result{by_, {}};
  for (PlacedBin& placed : bins_) result.bins.push_back(std::move(placed.bin));
  return result;
}

}  // namespace

std::optional<Bins> read_bins(const Value& value, const ReadChecks& checks, Faults& faults, Faults& warnings) {
  return BinsReader{checks, faults, warnings}.read(value);
}

}  // namespace probewright::limits::reader
