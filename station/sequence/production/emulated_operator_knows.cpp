#include <algorithm>
#include <variant>

#include "station/sequence/production/emulated_operator.h"

// What the operator hears of the line and has in mind.
namespace probewright::sequence::production {
namespace {

/// How long runs that are being stopped may take to tell their end.
constexpr Duration stop_patience = std::chrono::seconds(5);

}  // namespace

void EmulatedOperator::hear(const LineEvent& event) {
  last_sign_ = clock_.steady_now();
  std::visit([this](const auto& kind) { heard(kind); }, event);
}

void EmulatedOperator::heard(const NestChanged& changed) { spots_[changed.view.nest].seen = changed.view; }

void EmulatedOperator::heard(const RunStarted&) {}

void EmulatedOperator::heard(const RunEnded& ended) {
  const RunOutcome& outcome = ended.outcome;
  Spot& spot = spots_[outcome.nest];
  const auto known =
      std::find_if(pieces_.begin(), pieces_.end(), [&](const Piece& piece) { return piece.serial == outcome.serial; });
  if (known == pieces_.end()) return;  // somebody else's
  const auto piece = static_cast<std::size_t>(known - pieces_.begin());
  work_.attempts.push_back({piece, spot.sits ? pieces_[*spot.sits].serial : "", outcome});
  spot.piece = piece;
  set(spot, Phase::to_take_out);
  if (!spot.lid_open) return;
  told(Mistake::lid_opened, piece, outcome.cause_words);
  if (outcome.verdict == RunVerdict::void_run) put_back(piece);
}

void EmulatedOperator::heard(const RunNotRecorded& lost) {
  work_.unrecorded.push_back(lost.serial + ": " + lost.problem.text());
  set(spots_[lost.nest], Phase::to_take_out);
}

void EmulatedOperator::heard(const ArmingEnded& ended) {
  Spot& spot = spots_[ended.nest];
  if (spot.phase == Phase::free || pieces_[spot.piece].serial != ended.serial) return;
  const std::string words = ended.problem.text();
  if (spot.phase == Phase::strayed) {
    spot.arming_over = true;
    told(Mistake::wrong_nest, spot.piece, words);
    return;
  }
  const bool mine = spot.phase == Phase::forgotten || stopping_;
  if (spot.phase == Phase::forgotten) told(Mistake::never_put_in, spot.piece, words);
  if (mine && !stopping_) put_back(spot.piece);
  if (!mine && !give_up(spot.piece, words)) queue_.push_back(spot.piece);
  set(spot, spot.sits ? Phase::to_take_out : Phase::free);
}

void EmulatedOperator::heard(const Answered& answer) {
  ++answered_;
  answer_ = answer;
}

void EmulatedOperator::heard(const PersonChanged& changed) {
  signed_in_ = changed.person ? changed.person->name : std::string{};
}

void EmulatedOperator::heard(const LotChanged& changed) { lot_ = changed.lot; }

void EmulatedOperator::stop() {
  stopping_ = true;
  for (auto& [nest, spot] : spots_)
    if (spot.phase == Phase::to_seat || spot.phase == Phase::forgotten) {
      queue_.push_front(spot.piece);
      set(spot, Phase::free);
    }
}

bool EmulatedOperator::finished() const {
  return !work_.trouble.empty() || ((stopping_ || queue_.empty()) && all_clear());
}

bool EmulatedOperator::all_clear() const {
  return std::all_of(spots_.begin(), spots_.end(), [](const auto& item) { return item.second.phase == Phase::free; });
}

/// No sign of the line for longer than anybody waits; a probe that has to rest is no reason to wonder.
bool EmulatedOperator::stuck() const {
  SteadyTime since = last_sign_;
  for (const std::size_t piece : queue_) since = std::max(since, not_before_[piece]);
  return clock_.steady_now() >= since + (stopping_ ? std::min(stop_patience, settings_.patience) : settings_.patience);
}

/// The first piece that may be scanned now.
std::optional<std::size_t> EmulatedOperator::next_in_queue() const {
  const SteadyTime now = clock_.steady_now();
  const auto next =
      std::find_if(queue_.begin(), queue_.end(), [&](std::size_t piece) { return not_before_[piece] <= now; });
  return next == queue_.end() ? std::nullopt : std::optional{*next};
}

bool EmulatedOperator::any(Phase phase) const {
  return std::any_of(spots_.begin(), spots_.end(), [phase](const auto& item) { return item.second.phase == phase; });
}

int EmulatedOperator::free_nests() const {
  return static_cast<int>(std::count_if(spots_.begin(), spots_.end(), [](const auto& item) {
    return item.second.phase == Phase::free && item.second.seen.state == NestState::empty;
  }));
}

int EmulatedOperator::another_free_nest(int than) const {
  for (const auto& [nest, spot] : spots_)
    if (nest != than && spot.phase == Phase::free && spot.seen.state == NestState::empty) return nest;
  return 0;
}

std::optional<Mistake> EmulatedOperator::pending(std::size_t piece) const { return mistakes_[piece]; }

/// Whether a mistake can be made with the scan that comes now.
bool EmulatedOperator::occasion_for(Mistake mistake) const {
  if (mistake == Mistake::wrong_nest) return free_nests() >= 2;
  return mistake != Mistake::left_in_place;  // that one is made where a probe is to be taken out
}

bool EmulatedOperator::occasion_may_come(Mistake mistake) const {
  if (mistake == Mistake::wrong_nest) return spots_.size() >= 2 && !all_clear();
  return any(Phase::in_test) || any(Phase::to_take_out);
}

void EmulatedOperator::not_made(std::size_t piece) {
  work_.blunders.push_back({*mistakes_[piece], piece, 0, false, false, {}});
  mistakes_[piece].reset();
}

Blunder& EmulatedOperator::blunder(Mistake mistake, std::size_t piece, int nest) {
  mistakes_[piece].reset();
  work_.blunders.push_back({mistake, piece, nest, true, false, {}});
  return work_.blunders.back();
}

/// Keeps a sentence with the newest mistake of that kind with this piece; one that was kept already is not kept twice.
void EmulatedOperator::told(Mistake mistake, std::size_t piece, const std::string& words) {
  const auto made = std::find_if(work_.blunders.rbegin(), work_.blunders.rend(),
                                 [&](const Blunder& b) { return b.mistake == mistake && b.piece == piece; });
  if (made == work_.blunders.rend() || words.empty()) return;
  if (made->told.empty() || made->told.back() != words) made->told.push_back(words);
}

void EmulatedOperator::put_back(std::size_t piece) { queue_.push_front(piece); }

void EmulatedOperator::set(Spot& spot, Phase phase) {
  spot.phase = phase;
  spot.since = clock_.steady_now();
}

/// What the bench would not do ends the work: the operator knows no way round it.
bool EmulatedOperator::must(const Result<void>& done) {
  if (!done && work_.trouble.empty()) work_.trouble = done.error().text();
  return done.has_value();
}

}  // namespace probewright::sequence::production
