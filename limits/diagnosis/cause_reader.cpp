#include <algorithm>

#include "limits/diagnosis/reader_parts.h"
#include "station/base/numbers.h"

namespace probewright::limits::diagnosis::reader {
namespace {

/// Reads one cause, key by key.
class CauseReader {
 public:
  CauseReader(const Map::Item& item, Map map, const Names& names, double within, Faults& faults)
      : place_(item.place), map_(std::move(map)), names_(names), within_(within), faults_(faults) {
    cause_.slug = item.key;
  }
  Cause read();

 private:
  void read_kind();
  void read_hard();
  void read_moves();
  void read_still();
  void read_may_move();
  void read_severity();
  void read_either_way();
  void read_rest();
  void clashes(const Value& value, const std::vector<std::string>& checks, std::string_view key);

  yaml::Place place_;
  Map map_;
  const Names& names_;
  double within_;
  Faults& faults_;
  Cause cause_;
};

void CauseReader::read_kind() {
  const auto value = map_.need("kind", faults_);
  const auto word = value ? known_word(*value, {"probe", "station"}, "rules_word_unknown", faults_) : std::nullopt;
  if (word == "station") cause_.kind = CauseKind::station;
}

/// A hard fault says at which stage it is decided; a soft one needs no stage. A nest is never convicted here, so it has
/// no hard faults.
void CauseReader::read_hard() {
  const auto value = map_.need("hard", faults_);
  const auto hard = value ? value->yes_no(faults_) : std::nullopt;
  const auto stage = map_.maybe("decided at");
  if (stage) {
    const auto name = known_word(*stage, names_.stages, "rules_unknown_stage", faults_);
    const auto at = name ? std::find(names_.stages.begin(), names_.stages.end(), *name) : names_.stages.end();
    if (at != names_.stages.end()) cause_.hard_at = static_cast<std::size_t>(at - names_.stages.begin());
  }
  if (!hard) return;
  const bool station = cause_.kind == CauseKind::station;
  if (*hard != stage.has_value() || (*hard && station))
    faults_.add(value->place(), station ? "rules_station_hard" : "rules_hard_stage", {{"cause", cause_.slug}});
}

void CauseReader::read_moves() {
  const auto value = map_.need("moves", faults_);
  auto moves = value ? value->map(faults_) : std::nullopt;
  if (!moves) return;
  for (const Map::Item& item : moves->items()) {
    if (std::find(names_.checks.begin(), names_.checks.end(), item.key) == names_.checks.end())
      faults_.add(item.place, "rules_unknown_check", {{"text", item.key}, {"hint", hint(item.key, names_.checks)}});
    cause_.moves.push_back({item.key, read_expected(item.value, within_, faults_)});
  }
  if (cause_.moves.empty()) faults_.add(value->place(), "rules_no_move", {{"cause", cause_.slug}});
}

void CauseReader::clashes(const Value& value, const std::vector<std::string>& checks, std::string_view key) {
  for (const Move& move : cause_.moves)
    if (std::find(checks.begin(), checks.end(), move.check) != checks.end())
      faults_.add(value.place(), "rules_moves_and_stays",
                  {{"cause", cause_.slug}, {"check", move.check}, {"key", std::string{key}}});
}

void CauseReader::read_still() {
  const auto value = map_.need("still", faults_);
  if (!value) return;
  Faults unheard{""};
  cause_.everything_else_still = value->is_scalar() && value->text(unheard) == "everything else";
  if (cause_.everything_else_still) return;
  cause_.still = known_words(*value, names_.checks, "rules_unknown_check", faults_);
  clashes(*value, cause_.still, "still");
}

void CauseReader::read_may_move() {
  const auto value = map_.maybe("may move");
  if (!value) return;
  cause_.may_move = known_words(*value, names_.checks, "rules_unknown_check", faults_);
  clashes(*value, cause_.may_move, "may move");
  if (!cause_.everything_else_still) faults_.add(value->place(), "rules_may_move_anyway", {{"cause", cause_.slug}});
}

/// "0.2 to 3": how many times the figures under `moves`.
void CauseReader::read_severity() {
  const auto value = map_.maybe("severity");
  if (!value) {
    if (!map_.maybe("decided at")) faults_.add(place_, "rules_no_severity", {{"cause", cause_.slug}});
    return;
  }
  const auto text = value->text(faults_);
  if (!text) return;
  constexpr std::string_view between = " to ";
  const auto at = text->find(between);
  const auto least = parse_double(std::string_view{*text}.substr(0, at));
  const auto most = at == std::string::npos ? least : parse_double(std::string_view{*text}.substr(at + between.size()));
  if (!least || !most || !(*least >= 0.001) || !(*most >= *least) || !(*most <= 1000.0))
    faults_.add(value->place(), "rules_severity", {{"text", *text}});
  else
    cause_.least = *least, cause_.most = *most;
}

/// What only says "above" has no other sign.
void CauseReader::read_either_way() {
  const auto value = map_.maybe("either way");
  if (!value) return;
  cause_.either_way = value->yes_no(faults_).value_or(false);
  const auto bound = [](const Expected& one) {
    return one.form == Expected::Form::above || one.form == Expected::Form::below;
  };
  for (const Move& move : cause_.moves)
    if (cause_.either_way && std::any_of(move.expected.begin(), move.expected.end(), bound))
      faults_.add(value->place(), "rules_either_way_bound", {{"cause", cause_.slug}, {"check", move.check}});
}

void CauseReader::read_rest() {
  read_either_way();
  if (const auto value = map_.maybe("how often"))
    cause_.how_often = bounded(*value, "how often", 0.001, 1000.0, faults_);
  if (const auto value = map_.maybe("looks like"))
    cause_.looks_like = known_words(*value, names_.causes, "rules_unknown_cause", faults_);
  cause_.rework = need_text(map_, "rework", faults_);
}

Cause CauseReader::read() {
  if (!is_slug(cause_.slug)) faults_.add(place_, "rules_bad_slug", {{"text", cause_.slug}});
  cause_.words = need_text(map_, "words", faults_);
  read_kind();
  read_hard();
  read_moves();
  read_still();
  read_may_move();
  read_severity();
  read_rest();
  map_.finish(faults_);
  return std::move(cause_);
}

}  // namespace

Cause read_cause(const Map::Item& item, const Names& names, double within, Faults& faults) {
  auto map = item.value.map(faults);
  if (!map) return {};
  return CauseReader{item, *std::move(map), names, within, faults}.read();
}

}  // namespace probewright::limits::diagnosis::reader
