#include "station/sequence/production/emulated_operator.h"

#include <algorithm>

#include "station/base/entropy.h"
#include "station/base/numbers.h"

// What the operator does. What the operator hears and knows stands in emulated_operator_knows.cpp.
namespace probewright::sequence::production {
namespace {

/// Between two looks at the line, the clock's time.
constexpr Duration look_pause = std::chrono::milliseconds(4);
/// After a refusal, before the same probe is scanned again.
constexpr Duration refusal_pause = std::chrono::seconds(1);
/// How long the line may take to notice a probe in the wrong nest: longer than a scan holds.
constexpr Duration notice_pause = std::chrono::seconds(25);
/// The line looks at an idle nest 20 times a second; a probe just taken out is not looked for again before.
constexpr Duration clear_pause = std::chrono::seconds(1);

/// "AQ20-W48-07" of "LOT/AQ20-W48-07/AQ-20/48/AQ20-048-00001"
std::string lot_of(const std::string& card) {
  const auto begin = card.find('/');
  if (begin == std::string::npos) return {};  // no card: no lot
  return card.substr(begin + 1, card.find('/', begin + 1) - begin - 1);
}

/// The same serial in the next lot: "AQ20-049-00001" of "AQ20-048-00001".
std::string in_next_lot(std::string serial) {
  const auto dash = serial.find('-');
  for (auto at = serial.find('-', dash + 1); at != std::string::npos && at-- > dash + 1;) {
    if (serial[at] != '9') {
      ++serial[at];
      break;
    }
    serial[at] = '0';
  }
  return serial;
}

}  // namespace

EmulatedOperator::EmulatedOperator(wire::LineClock& clock, ProbeHandler& handler, std::function<void(LineRequest)> ask,
                                   OperatorSettings settings, std::vector<Piece> pieces)
    : clock_(clock),
      handler_(handler),
      ask_(std::move(ask)),
      settings_(std::move(settings)),
      pieces_(std::move(pieces)),
      refusals_(pieces_.size(), 0),
      not_before_(pieces_.size(), SteadyTime{Duration::min()}) {
  for (std::size_t piece = 0; piece < pieces_.size(); ++piece) {
    queue_.push_back(piece);
    mistakes_.push_back(settings_.mistakes.at(piece));
  }
}

asio::awaitable<void> EmulatedOperator::work() {
  last_sign_ = clock_.steady_now();
  const bool begun = co_await begin();
  while (begun && !finished()) {
    if (stuck()) {
      work_.trouble = "the line gave no sign for " + std::to_string(settings_.patience.count() / 1'000'000'000) + " s";
      break;
    }
    const bool did_something = co_await one_thing();
    if (!did_something) co_await look();
  }
  co_await end();
}

/// Waits for a nest that is ready, signs in and opens the lot. False when the line would not have it.
asio::awaitable<bool> EmulatedOperator::begin() {
  const bool there = co_await ready();
  if (!there) co_return false;
  if (!settings_.badge.empty()) {
    const Answered answer = co_await scan(settings_.badge);
    if (!answer.taken) work_.trouble = answer.words;
  }
  const std::string lot = lot_of(settings_.lot_card);  // it may be open since an earlier start
  if (work_.trouble.empty() && lot_ != lot) {
    const Answered answer = co_await scan(settings_.lot_card);
    if (!answer.taken && lot_ != lot) work_.trouble = answer.words;
  }
  co_return work_.trouble.empty();
}

asio::awaitable<bool> EmulatedOperator::ready() {
  const auto is_ready = [](const auto& item) { return item.second.seen.state != NestState::not_ready; };
  while (!stopping_ && !std::any_of(spots_.begin(), spots_.end(), is_ready)) {
    if (stuck()) {
      work_.trouble = spots_.empty() ? "the line shows no nest" : spots_.begin()->second.seen.words;
      co_return false;
    }
    co_await look();
  }
  co_return !stopping_;
}

/// A person who leaves ends the lot when all of it is done, and signs out.
asio::awaitable<void> EmulatedOperator::end() {
  for (const std::size_t piece : queue_) work_.left_out.push_back({piece, "the work ended before it was scanned"});
  queue_.clear();
  if (stopping_ || !work_.trouble.empty()) co_return;
  if (!settings_.lot_card.empty()) ask(CloseLot{});
  if (!settings_.badge.empty()) ask(SignOut{});
}

asio::awaitable<bool> EmulatedOperator::one_thing() {
  for (const auto& item : spots_) {
    const bool did_something = co_await tend(item.first);
    if (did_something) co_return true;
  }
  const bool scanned = co_await next_piece();
  co_return scanned;
}

asio::awaitable<bool> EmulatedOperator::tend(int nest) {
  switch (spots_[nest].phase) {
    case Phase::free:
      return tend_free(nest);
    case Phase::to_seat:
      return seat(nest);
    case Phase::strayed:
      return set_right(nest);
    case Phase::in_test:
      return meddle(nest);
    case Phase::to_take_out:
      return take_out(nest);
    case Phase::forgotten:
    case Phase::holds_stray:
      break;
  }
  return []() -> asio::awaitable<bool> { co_return false; }();
}

/// Takes out what somebody left in a nest: the nest says so.
asio::awaitable<bool> EmulatedOperator::tend_free(int nest) {
  Spot& spot = spots_[nest];
  if (spot.seen.state != NestState::occupied || clock_.steady_now() < spot.cleared + clear_pause) co_return false;
  co_await move_hands();
  static_cast<void>(handler_.remove(nest));  // it may be gone by now
  spot.sits.reset();
  spot.cleared = clock_.steady_now();
  co_return true;
}

/// Puts the scanned probe in: into its nest or, by mistake, into another.
asio::awaitable<bool> EmulatedOperator::seat(int nest) {
  Spot& spot = spots_[nest];
  co_await move_hands();
  if (spot.phase != Phase::to_seat) co_return true;  // the line gave it up meanwhile
  const std::size_t piece = spot.piece;
  const int other = another_free_nest(nest);
  const bool astray = pending(piece) == Mistake::wrong_nest && other != 0;
  if (pending(piece) == Mistake::wrong_nest && !astray) not_made(piece);
  const int into = astray ? other : nest;
  if (!must(handler_.seat(into, pieces_[piece]))) co_return true;
  spots_[into].sits = piece;
  spot.strayed_to = into;
  spot.arming_over = false;
  if (astray) {
    blunder(Mistake::wrong_nest, piece, into);
    set(spots_[into], Phase::holds_stray);
  }
  set(spot, astray ? Phase::strayed : Phase::in_test);
  co_return true;
}

/// The probe went into the wrong nest: waits until the line says so, takes it out, and puts it where it belongs or
/// scans it again.
asio::awaitable<bool> EmulatedOperator::set_right(int nest) {
  Spot& spot = spots_[nest];
  Spot& other = spots_[spot.strayed_to];
  const bool noticed = spot.arming_over || other.seen.state == NestState::occupied;
  if (!noticed && clock_.steady_now() < spot.since + notice_pause) co_return false;
  told(Mistake::wrong_nest, spot.piece, other.seen.words);
  co_await move_hands();
  if (!must(handler_.remove(spot.strayed_to))) co_return true;
  other.sits.reset();
  other.cleared = clock_.steady_now();
  set(other, Phase::free);
  if (spot.arming_over) put_back(spot.piece);
  set(spot, spot.arming_over ? Phase::free : Phase::to_seat);
  co_return true;
}

/// Does to a running test what should not be done, where that is this piece's mistake.
asio::awaitable<bool> EmulatedOperator::meddle(int nest) {
  Spot& spot = spots_[nest];
  if (spot.seen.state != NestState::running || spot.seen.serial != pieces_[spot.piece].serial) co_return false;
  const std::size_t piece = spot.piece;
  if (pending(piece) == Mistake::scanned_in_test) {
    co_await scan_by_mistake(Mistake::scanned_in_test, piece, nest, pieces_[piece].serial);
    co_return true;
  }
  if (pending(piece) != Mistake::lid_opened) co_return false;
  if (spot.lid_at_stage == 0) {
    // Before the last part of the run: that one may be over before the hand is there.
    SeededEntropy entropy{derived_seed(settings_.mistakes.seed + 1, piece)};
    spot.lid_at_stage =
        1 + static_cast<int>(entropy.next() % static_cast<std::uint64_t>(std::max(spot.seen.stages - 1, 1)));
  }
  if (spot.seen.stage < spot.lid_at_stage) co_return false;
  blunder(Mistake::lid_opened, piece, nest);
  spot.lid_open = must(handler_.lid(nest, true));
  co_return true;
}

asio::awaitable<bool> EmulatedOperator::take_out(int nest) {
  Spot& spot = spots_[nest];
  const std::size_t piece = spot.piece;
  const auto next = next_in_queue();
  if (!stopping_ && next && pending(*next) == Mistake::left_in_place) co_await leave_in_place(nest, *next);
  co_await move_hands();
  if (spot.sits && !must(handler_.remove(nest))) co_return true;
  if (spot.lid_open) static_cast<void>(must(handler_.lid(nest, false)));
  spot.lid_open = false;
  spot.sits.reset();
  spot.cleared = clock_.steady_now();
  set(spot, Phase::free);
  if (!stopping_ && pending(piece) == Mistake::scanned_after_verdict)
    co_await scan_by_mistake(Mistake::scanned_after_verdict, piece, nest, pieces_[piece].serial);
  if (pending(piece) == Mistake::scanned_in_test || pending(piece) == Mistake::lid_opened) not_made(piece);
  co_return true;
}

/// Scans the next probe for the nest that still holds the last one.
asio::awaitable<void> EmulatedOperator::leave_in_place(int nest, std::size_t next) {
  blunder(Mistake::left_in_place, next, nest);
  const Answered chosen = co_await scan("nest " + std::to_string(nest));
  told(Mistake::left_in_place, next, chosen.words);
  if (!chosen.taken) co_return;
  const Answered answer = co_await scan(pieces_[next].serial);
  told(Mistake::left_in_place, next, answer.words);
  if (!answer.taken) co_return;
  work_.blunders.back().taken = answer.nest == nest;
  std::erase(queue_, next);
  spots_[answer.nest].piece = next;
  set(spots_[answer.nest], Phase::to_seat);
}

/// Scans what is next, into any nest that is free. False when there was nothing to scan.
asio::awaitable<bool> EmulatedOperator::next_piece() {
  const auto next = next_in_queue();
  // One probe is in hand at a time: as long as the line waits for one, another scan would be a mistake.
  if (stopping_ || !next || free_nests() == 0 || any(Phase::to_seat) || any(Phase::forgotten) || any(Phase::strayed))
    co_return false;
  const std::size_t piece = *next;
  if (const auto mistake = pending(piece)) {
    if (!occasion_for(*mistake) && occasion_may_come(*mistake)) co_return false;
    if (!occasion_for(*mistake)) not_made(piece);
    const std::string text = mistaken_text(*mistake, pieces_[piece].serial);
    if (!text.empty()) co_await scan_by_mistake(*mistake, piece, 0, text);
  }
  std::erase(queue_, piece);
  co_await scan_piece(piece);
  co_return true;
}

asio::awaitable<void> EmulatedOperator::scan_piece(std::size_t piece) {
  co_await move_hands();
  const Answered answer = co_await scan(pieces_[piece].serial);
  if (!answer.taken || answer.nest == 0) {
    put_aside(piece, answer);
    co_return;
  }
  Spot& spot = spots_[answer.nest];
  spot.piece = piece;
  spot.lid_at_stage = 0;
  const bool forgets = pending(piece) == Mistake::never_put_in;
  if (forgets) blunder(Mistake::never_put_in, piece, answer.nest);
  set(spot, forgets ? Phase::forgotten : Phase::to_seat);
}

/// Scans something that should not be scanned now. Should the line arm a nest for it, that is taken back.
asio::awaitable<void> EmulatedOperator::scan_by_mistake(Mistake mistake, std::size_t piece, int nest,
                                                        std::string text) {
  blunder(mistake, piece, nest);
  const Answered answer = co_await scan(std::move(text));
  told(mistake, piece, answer.words);
  work_.blunders.back().taken = answer.taken;
  if (answer.taken && answer.nest != 0) ask(StopNest{answer.nest, signed_in_});
}

void EmulatedOperator::ask(LineRequest request) {
  ++asked_;
  ask_(std::move(request));
}

asio::awaitable<Answered> EmulatedOperator::scan(std::string text) {
  ask(Scan{std::move(text)});
  const std::uint64_t mine = asked_;
  const SteadyTime until = clock_.steady_now() + settings_.patience;
  while (answered_ < mine && clock_.steady_now() < until) co_await look();
  if (answered_ >= mine) co_return answer_;
  work_.trouble = "the line does not answer a scan";
  co_return Answered{false, work_.trouble, std::nullopt, 0};
}

asio::awaitable<void> EmulatedOperator::move_hands() {
  if (settings_.movement > Duration{}) co_await clock_.wait_until(clock_.steady_now() + settings_.movement);
}

asio::awaitable<void> EmulatedOperator::look() { return clock_.wait_until(clock_.steady_now() + look_pause); }

std::string EmulatedOperator::mistaken_text(Mistake mistake, const std::string& serial) const {
  switch (mistake) {
    case Mistake::wrong_pattern:
      return serial.substr(0, serial.size() - 1);
    case Mistake::other_lot:
      return in_next_lot(serial);
    case Mistake::unknown_badge:
      return "AQS-0X00-ZZ";
    default:
      return {};
  }
}

/// A piece that the line will not take now: it comes again after the others, at the earliest when the line says.
void EmulatedOperator::put_aside(std::size_t piece, const Answered& answer) {
  Duration rest = refusal_pause;
  const bool rests = answer.problem && answer.problem->id == "serial_rests";
  if (rests)
    for (const auto& [name, value] : answer.problem->arguments)
      if (name == "seconds") rest = std::chrono::seconds(parse_integer(value).value_or(1));
  if (!rests && give_up(piece, answer.words)) return;
  not_before_[piece] = clock_.steady_now() + rest;
  queue_.push_back(piece);
}

/// After the third refusal a piece is left out, with the line's last word.
bool EmulatedOperator::give_up(std::size_t piece, const std::string& words) {
  if (++refusals_[piece] < 3) return false;
  work_.left_out.push_back({piece, words});
  return true;
}

}  // namespace probewright::sequence::production
