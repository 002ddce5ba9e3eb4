#include "station/sequence/floor.h"

#include <algorithm>

#include "db/queries/entries.h"
#include "db/queries/lot_progress.h"
#include "db/queries/tries.h"
#include "station/sequence/tries_rule.h"

namespace probewright::sequence {
namespace {

constexpr const char* line_place = "line";
constexpr std::size_t most_failing_told = 3;

Body body_of(const LotCard& card, int sheet_revision) {
  return Body{Body::Object{{"first_serial", card.first_serial},
                           {"last_serial", card.last_serial},
                           {"lot", card.lot},
                           {"model", card.model},
                           {"quantity", card.quantity},
                           {"sheet_revision", sheet_revision}}};
}

LotCard card_of(const Body& body) {
  return {body.text("lot"), body.text("model"), static_cast<int>(body.number("quantity")), body.text("first_serial"),
          body.text("last_serial")};
}

/// Newest entry of one kind; of one lot, or of any line_place `lot` is empty.
std::optional<db::EntryRecord> newest_entry(db::Reader reader, std::string_view kind, std::string_view lot) {
  const auto found = db::entries(reader, 1, INT64_MAX, kind);
  const auto newest = std::find_if(found.rbegin(), found.rend(), [&](const db::EntryRecord& entry) {
    return lot.empty() || entry.data.text("lot") == lot;
  });
  if (newest == found.rend()) return std::nullopt;
  return *newest;
}

}  // namespace

Floor::Floor(const Configuration& configuration, LineServices& services)
    : configuration_(configuration), services_(services) {}

const std::string& Floor::lot() const {
  static const std::string none;
  return lot_ ? lot_->card.lot : none;
}

asio::awaitable<void> Floor::put(std::string kind, Body data) {
  const std::string who = person_ ? person_->name : "station";
  co_await services_.ledger.commit([&](db::Change& change) { change.add_entry(kind, who, data); });
}

asio::awaitable<void> Floor::recover() {
  std::optional<db::EntryRecord> opened, closed;
  co_await services_.ledger.commit([&](db::Change& change) {
    opened = newest_entry(change.reader(), "lot_opened", {});
    closed = newest_entry(change.reader(), "lot_closed", {});
  });
  if (!opened || (closed && closed->number > opened->number)) co_return;
  LotCard card = card_of(opened->data);
  if (configuration_.sheets.find(card.model) == configuration_.sheets.end()) co_return;  // its model is gone
  co_await take_up(std::move(card));
}

asio::awaitable<void> Floor::take_up(LotCard card) {
  db::LotProgress progress;
  co_await services_.ledger.commit([&](db::Change& change) {
    db::Reader reader = change.reader();
    progress = db::lot_progress(reader, card.lot);
  });
  const int revision = configuration_.sheets.find(card.model)->second.value.revision;
  for (auto& [serial, tested] : tested_) tested.lot.clear();  // counted by the ledger from here on
  lot_ = OpenLot{std::move(card), revision, progress.tested};
  services_.tell(LotChanged{lot_->card.lot, lot_->card.model});
}

asio::awaitable<void> Floor::sign_in(Person person) {
  if (person_ && person_->name == person.name) co_return;
  if (person_) co_await sign_out();
  const std::string who = person.name;
  const Body data{Body::Object{{"person", person.name}, {"role", std::string{slug(person.role)}}}};
  co_await services_.ledger.commit([&](db::Change& change) {
    if (configuration_.people) {
      const DocumentText& document = configuration_.people->document;
      change.add_document({document.kind, document.name, std::to_string(document.revision), document.text, "station"});
    }
    change.add_entry("sign_in", who, data);
  });
  person_ = SignedIn{person.name, std::string{slug(person.role)}};
  services_.tell(PersonChanged{person_});
}

asio::awaitable<Result<void>> Floor::sign_out() {
  if (!person_) co_return Problem{"nobody_signed_in", line_place};
  co_await put("sign_out", Body{Body::Object{{"person", person_->name}}});
  person_.reset();
  services_.tell(PersonChanged{});
  co_return Result<void>{};
}

/// Operators run the tests; engineers may, too.
Result<void> Floor::may_run() const {
  if (!person_) return Problem{"nobody_signed_in", line_place};
  if (person_->role != slug(Role::operating) && person_->role != slug(Role::engineering))
    return Problem{"person_may_not", line_place, {{"person", person_->name}, {"role", person_->role}}};
  return {};
}

asio::awaitable<std::optional<Body>> Floor::newest_of_lot(std::string lot, std::string kind) {
  std::optional<db::EntryRecord> found;
  co_await services_.ledger.commit([&](db::Change& change) { found = newest_entry(change.reader(), kind, lot); });
  if (!found) co_return std::nullopt;
  co_return found->data;
}

asio::awaitable<Result<void>> Floor::open_lot(LotCard card) {
  if (auto may = may_run(); !may) co_return may.error();
  if (lot_) co_return Problem{"lot_is_open", line_place, {{"lot", lot_->card.lot}}};
  if (!configuration_.station.value.emulated) co_return Problem{"purpose_not_possible", line_place};
  const auto opened = co_await newest_of_lot(card.lot, "lot_opened");
  const auto closed = co_await newest_of_lot(card.lot, "lot_closed");
  if (closed) co_return Problem{"lot_was_closed", line_place, {{"lot", card.lot}}};
  if (opened && !(card_of(*opened) == card)) co_return Problem{"lot_card_differs", line_place, {{"lot", card.lot}}};
  const int revision = configuration_.sheets.find(card.model)->second.value.revision;
  co_await put("lot_opened", body_of(card, revision));
  co_await take_up(std::move(card));
  co_return Result<void>{};
}

asio::awaitable<Result<void>> Floor::close_lot() {
  if (auto may = may_run(); !may) co_return may.error();
  if (!lot_) co_return Problem{"no_lot_open", line_place};
  co_await put("lot_closed", Body{Body::Object{{"lot", lot_->card.lot}}});
  lot_.reset();
  services_.tell(LotChanged{});
  co_return Result<void>{};
}

asio::awaitable<Result<void>> Floor::admit(std::string serial) {
  if (auto may = may_run(); !may) co_return may.error();
  if (!lot_) co_return Problem{"no_lot_open", line_place};
  if (!lot_->card.holds(serial))
    co_return Problem{"serial_of_other_lot",
                      line_place,
                      {{"serial", serial},
                       {"lot", lot_->card.lot},
                       {"first", lot_->card.first_serial},
                       {"last", lot_->card.last_serial}}};
  std::vector<db::Try> runs;
  co_await services_.ledger.commit([&](db::Change& change) {
    db::Reader reader = change.reader();
    runs = db::tries_of_serial(reader, serial, slug(Purpose::production));
  });
  const limits::Sheet& sheet = configuration_.sheets.find(lot_->card.model)->second.value;
  const TryAsked asked{serial, services_.clock.utc_now(), person_ && person_->role == slug(Role::engineering),
                       services_.clock.speed()};
  if (auto problem = not_another_try(runs, sheet.retest, asked)) co_return *problem;
  co_return Result<void>{};
}

void Floor::note(const RunOutcome& outcome) {
  if (outcome.purpose != Purpose::production) return;
  if (!first_end_) first_end_ = services_.clock.steady_now();
  last_end_ = services_.clock.steady_now();
  ++ends_;
  if (outcome.verdict == RunVerdict::void_run) {
    ++voids_;
    return;
  }
  Tested& tested = tested_[outcome.serial];
  if (!tested.first) tested.first = outcome.verdict;
  tested.newest = outcome.verdict;
  tested.lot = lot();
  if (outcome.verdict == RunVerdict::fail)
    for (const std::string& check : outcome.failing) ++failing_[check];
}

std::optional<OpenLotView> Floor::lot_view() const {
  if (!lot_) return std::nullopt;
  const auto now = std::count_if(tested_.begin(), tested_.end(),
                                 [&](const auto& item) { return item.second.lot == lot_->card.lot; });
  return OpenLotView{lot_->card.lot, lot_->card.model, lot_->sheet_revision, lot_->card.quantity,
                     lot_->tested_before + static_cast<int>(now)};
}

TallyView Floor::tally() const {
  TallyView tally;
  tally.tested = static_cast<int>(tested_.size());
  for (const auto& [serial, tested] : tested_) {
    tally.passed += tested.newest == RunVerdict::pass;
    tally.failed += tested.newest == RunVerdict::fail;
    tally.passed_first_time += tested.first == RunVerdict::pass;
  }
  tally.voids = voids_;
  // The first end begins the count: from then on one more end is one more probe.
  if (ends_ > 1 && *last_end_ > *first_end_)
    tally.probes_per_hour = (ends_ - 1) * 3600.0 / seconds(*last_end_ - *first_end_);
  for (const auto& [check, runs] : failing_) tally.commonest_failing.push_back({check, runs});
  std::stable_sort(tally.commonest_failing.begin(), tally.commonest_failing.end(),
                   [](const auto& a, const auto& b) { return a.runs > b.runs; });
  if (tally.commonest_failing.size() > most_failing_told) tally.commonest_failing.resize(most_failing_told);
  return tally;
}

}  // namespace probewright::sequence
