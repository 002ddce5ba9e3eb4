#pragma once
#include <boost/asio/awaitable.hpp>
#include <deque>
#include <functional>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "drivers/wire/line_clock.h"
#include "station/sequence/line_types.h"
#include "station/sequence/production/probe_handler.h"
#include "station/sequence/production/work.h"

namespace probewright::sequence::production {

namespace asio = boost::asio;

struct OperatorSettings {
  std::string badge;                             ///< what is scanned to sign in; empty: somebody is signed in already
  std::string lot_card;                          ///< "LOT/<lot>/<model>/<quantity>/<first serial>"; empty: no lot
  Duration movement{};                           ///< what one movement of the hands takes, time of the clock
  Duration patience = std::chrono::seconds(60);  ///< without any sign of the line, the work is given up
  MistakePlan mistakes;
};

/// One person with two hands who works through a list of probes in all nests at once: scans, puts in, waits for the
/// verdict, takes out. Uses the doors that people have: requests to the line, hands at the bench; knows what people
/// see: the line's events. Reads what the line says to a mistake and does it. One thread, which may be the line's.
class EmulatedOperator {
 public:
  /// `ask` hands a request to the line and returns at once. Clock and handler outlive the operator.
  EmulatedOperator(wire::LineClock& clock, ProbeHandler& handler, std::function<void(LineRequest)> ask,
                   OperatorSettings settings, std::vector<Piece> pieces);

  /// Returns when every piece is done, or after stop(), or when the line gives no more sign; all nests are empty then,
  /// as far as the handler would do it.
  asio::awaitable<void> work();
  /// What the line told. Every event from the line's start on, in order.
  void hear(const LineEvent& event);
  /// No more scans: what runs is waited for and taken out. For a line that is being finished.
  void stop();

  const Work& done() const { return work_; }
  const std::vector<Piece>& pieces() const { return pieces_; }

 private:
  enum class Phase { free, to_seat, forgotten, strayed, holds_stray, in_test, to_take_out };
  /// A nest as the operator has it in mind.
  struct Spot {
    NestView seen;
    Phase phase = Phase::free;
    std::size_t piece = 0;
    int strayed_to = 0;               ///< the nest that the probe was put into by mistake
    bool arming_over = false;         ///< strayed: the line has given the scan up
    SteadyTime since;                 ///< of the phase
    std::optional<std::size_t> sits;  ///< which piece is really in it
    bool lid_open = false;
    int lid_at_stage = 0;
    SteadyTime cleared;  ///< when something was last taken out
  };

  asio::awaitable<bool> begin();
  asio::awaitable<void> end();
  asio::awaitable<bool> ready();
  asio::awaitable<bool> one_thing();
  asio::awaitable<bool> tend(int nest);
  asio::awaitable<bool> tend_free(int nest);
  asio::awaitable<bool> seat(int nest);
  asio::awaitable<bool> set_right(int nest);
  asio::awaitable<bool> meddle(int nest);
  asio::awaitable<bool> take_out(int nest);
  asio::awaitable<bool> next_piece();
  asio::awaitable<void> scan_piece(std::size_t piece);
  asio::awaitable<void> scan_by_mistake(Mistake mistake, std::size_t piece, int nest, std::string text);
  asio::awaitable<void> leave_in_place(int nest, std::size_t next);
  asio::awaitable<Answered> scan(std::string text);
  void ask(LineRequest request);
  asio::awaitable<void> move_hands();
  asio::awaitable<void> look();

  void heard(const NestChanged& changed);
  void heard(const RunStarted& started);
  void heard(const RunEnded& ended);
  void heard(const RunNotRecorded& lost);
  void heard(const ArmingEnded& ended);
  void heard(const Answered& answer);
  void heard(const PersonChanged& changed);
  void heard(const LotChanged& changed);

  bool finished() const;
  bool all_clear() const;
  bool stuck() const;
  int free_nests() const;
  int another_free_nest(int than) const;
  bool any(Phase phase) const;
  std::optional<Mistake> pending(std::size_t piece) const;
  bool occasion_for(Mistake mistake) const;
  bool occasion_may_come(Mistake mistake) const;
  void not_made(std::size_t piece);
  Blunder& blunder(Mistake mistake, std::size_t piece, int nest);
  void told(Mistake mistake, std::size_t piece, const std::string& words);
  void put_back(std::size_t piece);
  void put_aside(std::size_t piece, const Answered& answer);
  bool give_up(std::size_t piece, const std::string& words);
  std::optional<std::size_t> next_in_queue() const;
  void set(Spot& spot, Phase phase);
  bool must(const Result<void>& done);
  std::string mistaken_text(Mistake mistake, const std::string& serial) const;

  wire::LineClock& clock_;
  ProbeHandler& handler_;
  std::function<void(LineRequest)> ask_;
  OperatorSettings settings_;
  std::vector<Piece> pieces_;

  std::map<int, Spot> spots_;
  std::deque<std::size_t> queue_;
  std::vector<std::optional<Mistake>> mistakes_;  ///< still to be made, by piece
  std::vector<int> refusals_;                     ///< by piece
  std::vector<SteadyTime> not_before_;            ///< by piece: the line asked to set it aside until then
  std::uint64_t asked_ = 0, answered_ = 0;        ///< requests, and the line's answers to them, in the same order
  Answered answer_;                               ///< the newest
  std::string lot_, signed_in_;
  SteadyTime last_sign_;
  bool stopping_ = false;
  Work work_;
};

}  // namespace probewright::sequence::production
