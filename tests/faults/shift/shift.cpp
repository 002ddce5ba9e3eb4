#include "tests/faults/shift/shift.h"

#include <algorithm>
#include <boost/asio/co_spawn.hpp>
#include <cmath>
#include <limits>

#include "db/queries/entry_range.h"
#include "db/queries/run_brief.h"
#include "db/queries/run_record.h"
#include "db/queries/tries.h"
#include "drivers/emulated/demo_lot.h"
#include "station/base/numbers.h"
#include "station/sequence/labels.h"
#include "station/sequence/production/true_values.h"
#include "tests/trial/memory_ledger.h"

namespace probewright::faults {
namespace {

namespace asio = boost::asio;
namespace production = sequence::production;
using emulated::BenchFault;
using sequence::LineEvent;
using sequence::NestState;
using sequence::RunOutcome;
using sequence::RunVerdict;
using trial::MemoryLedger;
using trial::Trial;

constexpr double watchdog_s = 2.0;
constexpr double longest_shift_s = 400.0;  ///< device time; a probe rests for a minute before its second try

sequence::Configuration with_nests(int nests) {
  sequence::Configuration configuration = trial::demonstration();
  auto& places = configuration.station.value.nests;
  for (int nest = 2; nest <= nests; ++nest) {
    const std::string number = std::to_string(nest);
    places.push_back({nest,
                      {"nest" + number + "-phantom", "PHC-2026-010" + number},
                      {"nest" + number + "-adapter", "ADC-2026-010" + number}});
  }
  return configuration;
}

/// A run that was told, with what was seen of its nest meanwhile.
struct Told {
  RunOutcome outcome;
  bool lit_at_end = false;                           ///< an LED was driven when it was told
  std::map<BenchFault, std::uint64_t> struck;        ///< in its nest, while it ran
  std::map<BenchFault, std::uint64_t> seen_before_;  ///< up to its start
};

/// Whether a truth lies outside what the sheet allows, by more than its uncertainty: nobody may pass that.
bool clearly_bad(const emulated::Truth& truth, const limits::Sheet& sheet, const production::TrueValues& values) {
  return std::any_of(sheet.checks.begin(), sheet.checks.end(), [&](const limits::CheckRule& rule) {
    if (rule.use != limits::Use::judged || rule.must_be_yes) return false;
    const auto value = values.of(truth, rule.check);
    const double beyond = rule.expanded_uncertainty;
    if (!value) return false;
    return std::isnan(*value) || (rule.limits.lower && *value < *rule.limits.lower - beyond) ||
           (rule.limits.upper && *value > *rule.limits.upper + beyond);
  });
}

std::string words_of(const sequence::NestChanged& changed) {
  const auto& view = changed.view;
  return "nest " + std::to_string(view.nest) + ": " + (view.stage > 0 ? view.doing : view.words);
}
std::string words_of(const sequence::RunStarted& started) {
  return "nest " + std::to_string(started.nest) + ": run " + std::to_string(started.run) + " of " + started.serial;
}
std::string words_of(const sequence::RunEnded& ended) {
  const RunOutcome& outcome = ended.outcome;
  return "nest " + std::to_string(outcome.nest) + ": " + outcome.serial + " " + std::string(slug(outcome.verdict)) +
         ", " + outcome.cause + " " + outcome.cause_words;
}
std::string words_of(const sequence::RunNotRecorded& lost) {
  return "nest " + std::to_string(lost.nest) + ": not recorded, " + lost.problem.text();
}
std::string words_of(const sequence::ArmingEnded& ended) {
  return "nest " + std::to_string(ended.nest) + ": " + ended.problem.text();
}
std::string words_of(const sequence::Answered& answered) { return "answer: " + answered.words; }
std::string words_of(const sequence::PersonChanged& changed) {
  return changed.person ? changed.person->name + " is there" : "nobody is there";
}
std::string words_of(const sequence::LotChanged& changed) { return "lot " + changed.lot; }
std::string words_of(const LineEvent& event) {
  return std::visit([](const auto& kind) { return words_of(kind); }, event);
}

class BenchHands final : public production::ProbeHandler {
 public:
  BenchHands(emulated::Bench& bench, const ShiftPlan& plan, bool exchange_pairs)
      : bench_(bench), plan_(plan), exchange_(exchange_pairs) {}
  Result<void> seat(int nest, const production::Piece& piece) override {
    const production::Piece& taken = exchange_ ? neighbour(piece) : piece;
    const auto fault = emulated::parse_fault(taken.fault);
    return fault ? bench_.seat(nest, taken.serial, taken.model, {*fault, taken.severity})
                 : bench_.seat(nest, taken.serial, taken.model);
  }
  Result<void> remove(int nest) override { return bench_.remove(nest); }
  Result<void> lid(int nest, bool open) override { return bench_.lid(nest, open); }

 private:
  /// The other one of a pair that lies side by side.
  const production::Piece& neighbour(const production::Piece& piece) const {
    for (std::size_t i = 0; i < plan_.pieces.size(); ++i) {
      const std::size_t other = i ^ 1u;
      if (plan_.pieces[i].serial == piece.serial && other < plan_.pieces.size()) return plan_.pieces[other];
    }
    return piece;
  }
  emulated::Bench& bench_;
  const ShiftPlan& plan_;
  bool exchange_;
};

/// What a shift has come to, over all lives of the station.
struct Shift {
  const ShiftPlan& plan;
  const Doubles& doubles;
  const Diary& diary;
  ShiftReport report;
  std::map<std::int64_t, Told> told;           ///< by run
  std::map<std::string, RunVerdict> verdicts;  ///< of serials, told
  std::map<std::string, emulated::Truth> truths;
  db::Seal known;  ///< the newest entry that was known to be on the disk
  UtcTime clock{1'796'103'000'000'000};

  void breach(const char* rule, const std::string& words) { report.breaches.push_back({rule, words}); }
  bool bad_physics() const {
    return std::any_of(plan.scenario.faults.begin(), plan.scenario.faults.end(),
                       [](const auto& fault) { return fault.fault >= BenchFault::band_drift; });
  }
};

/// From a start of the station to its end.
class OneLife {
 public:
  OneLife(Shift& shift, const Life& life, MemoryLedger& ledger, const sequence::Configuration& configuration)
      : shift_(shift), life_(life), ledger_(ledger), station_(options(configuration)) {}

  /// Whether everything was tested that can be.
  bool live() {
    ++shift_.report.lives;
    if (station_.start_problem()) {
      refused_start(*station_.start_problem());
      return false;
    }
    for (const auto& late : station_.closed_late())
      if (shift_.told.contains(late.run)) shift_.breach("told but open", "run " + std::to_string(late.run));
    hands_.emplace(station_.bench(), shift_.plan, shift_.doubles.hands_exchange_pairs);
    person_.emplace(
        station_.clock(), *hands_, [this](const auto& asked) { station_.line().request(asked); }, settings(), pieces());
    for (const auto& event : station_.events()) hear(event);
    station_.on_event = [this](const auto& event) { hear(event); };
    const bool finished = work();
    note_what_struck(finished);
    if (!finished) return false;
    recover();
    if (!station_.finish()) shift_.breach("the line does not end", "");
    return true;
  }

 private:
  trial::Options options(const sequence::Configuration& configuration) {
    trial::Options with = ledger_.options(shift_.plan.seed);
    with.bench.nests = shift_.plan.nests;
    with.configuration = &configuration;
    with.scenario = shift_.plan.scenario;
    with.between = shift_.doubles.ports;
    with.start = shift_.clock;
    return with;
  }

  std::vector<production::Piece> pieces() const {
    std::vector<production::Piece> left;
    for (const auto& piece : shift_.plan.pieces)
      if (!shift_.verdicts.contains(piece.serial)) left.push_back(piece);
    return left;
  }

  production::OperatorSettings settings() const {
    const auto& all = shift_.plan.pieces;
    production::OperatorSettings with;
    with.badge = "AQS-7Q41-IV";
    with.lot_card = "LOT/AQ20-W48-07/AQ-20/" + std::to_string(all.size()) + "/" + all.front().serial;
    with.movement = std::chrono::milliseconds(300);
    with.patience = std::chrono::seconds(40);  // longer than a scan arms a nest
    with.mistakes = shift_.plan.mistakes;
    return with;
  }

  void refused_start(const Problem& problem) {
    const bool excused = problem.id == "ledger_clock_behind" || life_.disk.die_at || life_.disk.fail_write ||
                         life_.disk.fail_sync || life_.disk.short_write || life_.disk.full_at;
    if (!excused || problem.text().empty()) shift_.breach("no start without a reason", problem.text());
    ++shift_.report.endings["no start: " + problem.id];
  }

  double now_s() { return seconds(station_.clock().steady_now().since_start); }

  /// False when the station died on the way.
  bool work() {
    bool ended = false;
    asio::co_spawn(station_.io(), person_->work(), [&ended](const std::exception_ptr& error) {
      ended = true;
      if (error) std::rethrow_exception(error);
    });
    if (life_.step_at_s) run_to(*life_.step_at_s, ended);
    if (life_.step_at_s && !dead() && !ended) station_.clock().step_utc(from_seconds(life_.step_by_s));
    run_to(life_.killed_at_s.value_or(longest_shift_s), ended);
    if (station_.broken()) shift_.breach("a nest broke", *station_.broken());
    if (life_.killed_at_s && !ended) return false;
    if (dead()) return die();
    if (!ended && set_back()) return give_up(ended);
    if (!ended) shift_.breach("a shift without end", station_.line().views().front().words);
    return ended;
  }

  /// Somebody set the clock back, so probes that failed before are told to rest until it has caught up.
  bool set_back() const {
    return std::any_of(shift_.plan.lives.begin(), shift_.plan.lives.end(),
                       [](const Life& life) { return life.step_at_s && life.step_by_s < 0.0; });
  }
  bool give_up(const bool& ended) {
    ++shift_.report.endings["probes left to rest: the clock was set back"];
    person_->stop();
    run_to(longest_shift_s + 120.0, ended);
    if (!ended) shift_.breach("a shift without end", "though nothing more is scanned");
    return ended;
  }

  bool dead() const { return station_.ledger_trouble().has_value(); }

  void run_to(double until_s, const bool& ended) {
    const SteadyTime limit{from_seconds(until_s)};
    station_.clock().run_until(
        station_.io(), [&] { return ended || dead() || station_.broken(); }, limit);
  }

  /// The ledger has failed: LEDs go off, the station says so in words and takes no more probes.
  bool die() {
    if (!dead_words().empty()) shift_.breach("silent about its ledger", dead_words());
    station_.let_pass(from_seconds(watchdog_s + 1.5));
    for (int nest = 1; nest <= shift_.plan.nests; ++nest) {
      const auto view = station_.line().views()[static_cast<std::size_t>(nest - 1)];
      const std::string where = "nest " + std::to_string(nest);
      if (station_.bench().drive(nest) != emulated::AdapterDevice::Drive{}) shift_.breach("lit after death", where);
      if (view.state != NestState::not_ready || view.words.empty())
        shift_.breach("ready without a ledger", where + ": " + view.words);
    }
    return false;
  }
  std::string dead_words() const { return station_.ledger_trouble()->text().empty() ? "no words" : std::string{}; }

  /// The bench is good again: so must the station be.
  void recover() {
    station_.bench().mend();
    for (int nest = 1; nest <= shift_.plan.nests; ++nest) static_cast<void>(station_.bench().remove(nest));
    const auto all_empty = [this] {
      const auto views = station_.line().views();
      return std::all_of(views.begin(), views.end(), [](const auto& view) { return view.state == NestState::empty; });
    };
    station_.clock().run_until(station_.io(), all_empty, station_.clock().steady_now() + std::chrono::seconds(60));
    for (const auto& view : station_.line().views())
      if (view.state != NestState::empty && !dead())
        shift_.breach("not ready on a good bench", "nest " + std::to_string(view.nest) + ": " + view.words);
    for (int nest = 1; nest <= shift_.plan.nests; ++nest)
      if (station_.bench().drive(nest) != emulated::AdapterDevice::Drive{})
        shift_.breach("lit without a run", "nest " + std::to_string(nest));
  }

  void hear(const LineEvent& event) {
    if (station_.seal().entry > shift_.known.entry) shift_.known = station_.seal();
    if (shift_.diary) shift_.diary(fixed(now_s(), 3) + " s  " + words_of(event));
    std::visit([this](const auto& kind) { heard(kind); }, event);
    if (person_) person_->hear(event);
  }
  template <class Other>
  void heard(const Other&) {}

  void heard(const sequence::RunStarted& started) {
    if (lit(started.nest)) shift_.breach("lit before a run", "nest " + std::to_string(started.nest));
    before_[started.nest] = station_.bench().troubles(started.nest);
  }

  void heard(const sequence::RunEnded& ended) {
    const RunOutcome& outcome = ended.outcome;
    ++shift_.report.runs;
    Told told{outcome, lit(outcome.nest), struck(outcome.nest), {}};
    count_ending(outcome, told.struck);
    // What the store knows to be on the disk comes before what is told.
    if (station_.seal().entry < outcome.closing_entry)
      shift_.breach("told before it was kept", "run " + std::to_string(outcome.run));
    if (outcome.verdict != RunVerdict::void_run) shift_.verdicts[outcome.serial] = outcome.verdict;
    check_cause(outcome, told.struck);
    check_readings(outcome, told.struck);
    shift_.told[outcome.run] = std::move(told);
  }

  void heard(const sequence::RunNotRecorded& lost) {
    const auto faults = struck(lost.nest);
    ++shift_.report.endings["not recorded"];
    for (const auto& [fault, times] : faults)
      ++shift_.report.faults["bench: " + std::string(slug_of(fault))].endings["not recorded"];
    if (!dead()) shift_.breach("not recorded for no reason", lost.problem.text());
  }

  bool lit(int nest) { return station_.bench().drive(nest) != emulated::AdapterDevice::Drive{}; }

  /// What went wrong with a nest since its run began.
  std::map<BenchFault, std::uint64_t> struck(int nest) {
    auto now = station_.bench().troubles(nest);
    for (const auto& [fault, times] : before_[nest]) now[fault] -= times;
    std::erase_if(now, [](const auto& entry) { return entry.second == 0; });
    return now;
  }

  void count_ending(const RunOutcome& outcome, const std::map<BenchFault, std::uint64_t>& faults) {
    const std::string verdict{slug(outcome.verdict)};
    std::string ending = verdict;
    if (outcome.verdict == RunVerdict::void_run || (!outcome.cause.empty() && outcome.cause != "completed"))
      ending += ": " + outcome.cause;
    ++shift_.report.endings[ending];
    for (const auto& [fault, times] : faults)
      ++shift_.report.faults["bench: " + std::string(slug_of(fault))].endings[verdict];
    if (const auto* piece = piece_of(outcome.serial); piece && !piece->fault.empty())
      ++shift_.report.faults["probe: " + piece->fault].endings[verdict];
  }

  const production::Piece* piece_of(const std::string& serial) const {
    for (const auto& piece : shift_.plan.pieces)
      if (piece.serial == serial) return &piece;
    return nullptr;
  }

  /// A run ends by a person or the probe only when somebody did that, and by a device not for one lone fault that the
  /// drivers must get over.
  void check_cause(const RunOutcome& outcome, const std::map<BenchFault, std::uint64_t>& faults) {
    const std::string where = outcome.serial + ": " + outcome.cause_words;
    if (outcome.cause == "probe_unplugged" || outcome.cause == "probe_exchanged")
      shift_.breach("a disturbance that was none", where);  // nobody takes a probe out in mid-run
    if (outcome.cause == "lid_opened" && !lid_was_opened(outcome, faults))
      shift_.breach("a disturbance that was none", where);
    const bool by_device = outcome.verdict == RunVerdict::void_run && outcome.cause.starts_with("device_");
    if (by_device && lone(outcome.nest, faults)) shift_.breach("a lone fault cost a run", where);
  }

  bool lid_was_opened(const RunOutcome& outcome, const std::map<BenchFault, std::uint64_t>& faults) const {
    if (faults.contains(BenchFault::lid_opened)) return true;
    for (const auto& fault : shift_.plan.scenario.faults)  // it may have been open already
      if (fault.fault == BenchFault::lid_opened && fault.nest.value_or(outcome.nest) == outcome.nest) return true;
    for (std::size_t i = 0; i < person_->pieces().size(); ++i)
      if (person_->pieces()[i].serial == outcome.serial && shift_.plan.mistakes.rate > 0.0) return true;
    return false;
  }

  /// At most two messages late by less than a second, lost, halting or behind some noise, in a nest with which nothing
  /// worse is wrong: what drivers must get over.
  bool lone(int nest, const std::map<BenchFault, std::uint64_t>& faults) const {
    const auto mild = [](BenchFault fault) {
      return fault == BenchFault::reply_late || fault == BenchFault::reply_missing ||
             fault == BenchFault::noise_bytes || fault == BenchFault::bytes_paused;
    };
    std::uint64_t times = 0;
    for (const auto& [fault, count] : faults) times += count;
    const auto& all = shift_.plan.scenario.faults;
    const bool all_mild = std::all_of(all.begin(), all.end(), [&](const auto& fault) {
      const bool elsewhere = fault.nest && *fault.nest != nest;
      return elsewhere || (mild(fault.fault) && fault.by_s <= 0.9);
    });
    return times >= 1 && times <= 2 && all_mild;
  }

  /// Readings belong to the serial under which they stand: the bench's truth of it says so. Of probes without a fault
  /// on a bench without errors beyond those that its certificates allow.
  void check_readings(const RunOutcome& outcome, const std::map<BenchFault, std::uint64_t>& faults) {
    const auto* piece = piece_of(outcome.serial);
    const auto truth = station_.bench().truths().find(outcome.serial);
    if (!piece || truth == station_.bench().truths().end()) return shift_.breach("a verdict on nobody", outcome.serial);
    shift_.truths.insert_or_assign(outcome.serial, truth->second);
    if (shift_.bad_physics() || faults.contains(BenchFault::lid_opened)) return;
    const auto& sheet = trial::demonstration().sheets.at(piece->model).value;
    if (outcome.verdict == RunVerdict::pass && clearly_bad(truth->second, sheet, values_))
      shift_.breach("a bad probe passed", outcome.serial + " " + piece->fault);
    if (!piece->fault.empty()) return;
    for (const auto& [reading, judgement] : outcome.readings) {
      const auto found = values_.at_station(truth->second, reading.check, station_.bench().own_errors(outcome.nest),
                                            station_.bench().options().ambient_degC);
      const double expected = found.value_or(std::numeric_limits<double>::quiet_NaN());
      if (!reading.value || !reading.expanded_uncertainty || std::isnan(expected)) continue;
      // What the sheet declares is for stations at large; k = 2, so three times that are 6 standard deviations.
      const double uncertainty = std::max(*reading.expanded_uncertainty, declared(sheet, reading.check));
      if (std::abs(*reading.value - expected) > 3.0 * uncertainty)
        shift_.breach("a wrong reading", outcome.serial + " " + reading.check + ": " + shortest(*reading.value) +
                                             ", truth " + shortest(expected) + ", U " + shortest(uncertainty));
    }
  }

  static double declared(const limits::Sheet& sheet, const std::string& check) {
    for (const limits::CheckRule& rule : sheet.checks)
      if (rule.check == check) return rule.expanded_uncertainty;
    return 0.0;
  }

  void note_what_struck(bool finished) {
    for (const auto& [fault, times] : station_.bench().troubles())
      shift_.report.faults["bench: " + std::string(slug_of(fault))].times += times;
    for (const auto& blunder : person_->done().blunders) {
      if (!blunder.made) continue;
      Fates& fates = shift_.report.faults["person: " + std::string(slug(blunder.mistake))];
      ++fates.times;
      ++fates.endings[blunder.taken ? "taken" : "refused in words"];
      if (finished && !blunder.taken && blunder.told.empty())
        shift_.breach("silent about a mistake", std::string(slug(blunder.mistake)));
    }
    shift_.report.device_s += now_s();
    shift_.clock = station_.clock().utc_now();
    shift_.clock.microseconds += 60'000'000;
    if (const auto seal = station_.seal(); seal.entry > shift_.known.entry) shift_.known = seal;
  }

  Shift& shift_;
  const Life& life_;
  MemoryLedger& ledger_;
  production::TrueValues values_{trial::demonstration().models.at("AQ-20").value};
  Trial station_;
  std::optional<BenchHands> hands_;
  std::optional<production::EmulatedOperator> person_;
  std::map<int, std::map<BenchFault, std::uint64_t>> before_;
};

/// Holds what the ledger has kept against what was told and against the rules of the floor.
class Audit {
 public:
  Audit(Shift& shift, MemoryLedger& ledger) : shift_(shift), ledger_(ledger) {}

  void check(bool last) {
    db::VerifyOptions options;
    options.vfs = ledger_.options(0).store.vfs;
    options.exclusive = true;
    if (shift_.known.entry > 0) options.printed = shift_.known;
    const auto report = db::verify("ledger.db", options);
    if (!report) {
      if (shift_.known.entry > 0) shift_.breach("the ledger is gone", report.error().text());
      return;
    }
    if (!report->ok() && shift_.known.entry == 0) return;  // it was killed before its first entry was kept
    if (!report->ok())
      return shift_.breach("the ledger does not agree", report->first_fault->table + " " + report->first_fault->what);
    if (last && report->open_runs > 0) shift_.breach("a run stays open", std::to_string(report->open_runs));
    shift_.report.seal = report->seal;
    read(last);
  }

 private:
  void read(bool last) {
    SystemClock clock;
    db::StoreOptions options = ledger_.options(0).store;
    options.lease = options.create = false;
    auto store = db::Store::open(options, clock);
    if (!store) return shift_.breach("the ledger does not open", store.error().text());
    {
      db::Reader reader = (*store)->reader();
      for (const auto& [run, told] : shift_.told) compare(reader, run, told);
      for (const auto& piece : shift_.plan.pieces) check_tries(reader, piece.serial);
    }
    if (last) make_labels(**store);
  }

  /// No verdict without its readings on the disk.
  void compare(db::Reader& reader, std::int64_t number, const Told& told) {
    const std::string where = "run " + std::to_string(number) + " of " + told.outcome.serial;
    const auto run = db::run_record(reader, {number});
    if (!run || !run->closing) return shift_.breach("told and not kept", where);
    if (run->closing->verdict != slug(told.outcome.verdict)) shift_.breach("another verdict kept", where);
    if (run->opened.serial != told.outcome.serial) shift_.breach("another serial kept", where);
    if (!run->opened.emulated) shift_.breach("not marked as emulated", where);
    if (told.lit_at_end && told.outcome.verdict != RunVerdict::void_run) shift_.breach("lit after a run", where);
    const Body* confirmed = run->closing->bench.find("drive_off_confirmed");
    if (told.lit_at_end && (!confirmed || !confirmed->boolean() || *confirmed->boolean()))
      shift_.breach("lit after a run", where + ", said to be dark");
    if (run->readings.size() != told.outcome.readings.size()) return shift_.breach("other readings kept", where);
    for (std::size_t i = 0; i < run->readings.size(); ++i) {
      const auto& kept = run->readings[i];
      const auto& said = told.outcome.readings[i].reading;
      if (kept.check != said.check || kept.value != said.value) shift_.breach("another reading kept", where);
    }
  }

  void check_tries(db::Reader& reader, const std::string& serial) {
    const auto tries = db::tries_of_serial(reader, serial, "production");
    const auto& sheet = trial::demonstration().sheets.at("AQ-20").value;
    const int most = 1 + sheet.retest.tries;
    if (static_cast<int>(tries.size()) > most)
      shift_.breach("too many tries", serial + ": " + std::to_string(tries.size()));
    for (std::size_t i = 0; i < tries.size(); ++i) {
      if (i + 1 < tries.size() && tries[i].verdict == "pass") shift_.breach("tested after a pass", serial);
      const auto run = db::run_record(reader, tries[i].run);
      if (run && run->closing) check_verdict(*run);
    }
  }

  /// Nobody can stop a run that fails and call it void; nothing that fails is called a pass.
  void check_verdict(const db::RunRecord& run) {
    const std::string& cause = run.closing->cause;
    const bool outside = std::any_of(run.readings.begin(), run.readings.end(),
                                     [](const auto& row) { return row.ok == "not_ok" && row.value; });
    const bool by_person = cause == "stopped_by_person" || cause == "lid_opened" || cause == "probe_unplugged" ||
                           cause == "probe_exchanged" || cause == "station_stopped";
    const std::string where = run.opened.serial + " " + run.closing->verdict + " " + cause;
    if (outside && run.closing->verdict == "pass") shift_.breach("a pass with a failing reading", where);
    if (outside && by_person && run.closing->verdict == "void") shift_.breach("a stop improved a verdict", where);
  }

  /// A pass label only for the last, passed run of a serial.
  void make_labels(db::Store& store) {
    for (const auto& [run, told] : shift_.told) {
      sequence::LabelEntry label;
      label.run = {run};
      label.code = "(21)" + told.outcome.serial;
      const auto made = store.commit([&](db::Change& change) { sequence::make_label_entry(change, label); });
      const bool may = told.outcome.verdict == RunVerdict::pass;
      if (made && !may) shift_.breach("a pass label without a pass", told.outcome.serial);
      if (!made && may) shift_.breach("no label for a pass", made.error().text());
    }
  }

  Shift& shift_;
  MemoryLedger& ledger_;
};

std::string kind_of(const Life& life) {
  const db::DiskFaults& disk = life.disk;
  const std::string again = disk.from_then_on ? " from then on" : "";
  if (disk.die_at) return "disk: dies";
  if (disk.fail_write) return "disk: a write fails" + again;
  if (disk.fail_sync) return "disk: a sync fails" + again;
  if (disk.short_write) return "disk: a short write";
  if (disk.full_at) return "disk: full";
  if (life.killed_at_s) return "station: killed";
  return "";
}

void note_life(ShiftReport& report, const Life& life, bool finished) {
  if (const std::string kind = kind_of(life); !kind.empty()) {
    Fates& fates = report.faults[kind + (life.power_lost ? ", power lost" : "")];
    ++fates.times;
    ++fates.endings[finished ? "not noticed" : "started anew"];
  }
  if (!life.step_at_s) return;
  Fates& fates = report.faults[life.step_by_s > 0.0 ? "clock: set forward" : "clock: set back"];
  ++fates.times;
  ++fates.endings[finished ? "went on" : "started anew"];
}

}  // namespace

void ShiftReport::add(const ShiftReport& other) {
  breaches.insert(breaches.end(), other.breaches.begin(), other.breaches.end());
  for (const auto& [name, fates] : other.faults) {
    faults[name].times += fates.times;
    for (const auto& [ending, count] : fates.endings) faults[name].endings[ending] += count;
  }
  for (const auto& [ending, count] : other.endings) endings[ending] += count;
  lives += other.lives;
  runs += other.runs;
  device_s += other.device_s;
  seal = other.seal;
}

ShiftReport make_shift(const ShiftPlan& plan, const Doubles& doubles, const Diary& diary) {
  Shift shift{plan, doubles, diary, {}, {}, {}, {}, {}};
  const sequence::Configuration configuration = with_nests(plan.nests);
  auto disk = std::make_unique<db::MemoryDisk>();
  std::uint64_t crash = plan.seed;
  for (std::size_t i = 0; i < plan.lives.size(); ++i) {
    const Life& life = plan.lives[i];
    MemoryLedger ledger{std::move(disk)};
    db::DiskFaults faults = life.disk;
    faults.lies_about_sync = doubles.disk_lies;
    ledger.disk().set_faults(faults);
    const bool finished = OneLife{shift, life, ledger, configuration}.live();
    note_life(shift.report, life, finished);
    disk = life.power_lost ? ledger.disk().after_crash(++crash) : ledger.disk().after_restart();
    MemoryLedger kept{std::move(disk)};
    const bool last = i + 1 == plan.lives.size();
    Audit{shift, kept}.check(last && finished);
    disk = kept.disk().after_restart();
    if (shift.clock < UtcTime{1'796'103'000'000'000}) shift.clock = {1'796'103'000'000'000};
  }
  return shift.report;
}

std::string table_of(const ShiftReport& report) {
  std::string text;
  for (const auto& [name, fates] : report.faults) {
    text += "  " + name + std::string(name.size() < 42 ? 42 - name.size() : 1, ' ');
    if (fates.times > 0) text += std::to_string(fates.times) + " times";
    std::string endings;
    for (const auto& [ending, count] : fates.endings)
      endings += (endings.empty() ? "" : ", ") + std::to_string(count) + " " + ending;
    text += (fates.times > 0 && !endings.empty() ? "; " : "") + endings + "\n";
  }
  text += "  runs:\n";
  for (const auto& [ending, count] : report.endings) text += "    " + std::to_string(count) + " " + ending + "\n";
  return text;
}

}  // namespace probewright::faults
