#pragma once
#include <boost/asio/awaitable.hpp>
#include <map>
#include <optional>
#include <string>

#include "station/sequence/line_services.h"
#include "station/sequence/line_view.h"
#include "station/sequence/scan_text.h"

namespace probewright::sequence {

/// Who is signed in, which lot is open, which serial may be tested, and the tally: what keeps a correct measurement
/// from becoming a wrong shipment. Each change is an entry of the ledger before it counts. Line thread only.
///
/// Here in their simplest honest form: a badge signs in, a lot card opens a lot. A real production run needs signed
/// documents and opening checks of the nest, which the station cannot make yet, so only a demonstration on an emulated
/// bench may call a run production.
class Floor {
 public:
  /// All of it outlives the floor.
  Floor(const Configuration& configuration, LineServices& services);

  /// Takes up the lot that was open when the line last ended. Nobody is signed in after a start. Throws ProblemError.
  asio::awaitable<void> recover();

  const std::optional<SignedIn>& person() const { return person_; }
  bool lot_open() const { return lot_.has_value(); }
  const std::string& lot() const;  ///< empty: none is open

  /// Signs a person in; whoever was signed in before is signed out by it. Throws ProblemError.
  asio::awaitable<void> sign_in(Person person);
  /// Errors: nobody_signed_in.
  asio::awaitable<Result<void>> sign_out();
  /// Errors: nobody_signed_in, person_may_not, lot_is_open (this one or another), lot_was_closed, lot_card_differs (it
  /// was opened before with another card), purpose_not_possible (on a real bench).
  asio::awaitable<Result<void>> open_lot(LotCard card);
  /// Errors: nobody_signed_in, person_may_not, no_lot_open.
  asio::awaitable<Result<void>> close_lot();

  /// Whether a serial may have a production run now. Errors: nobody_signed_in, person_may_not, no_lot_open,
  /// serial_of_other_lot, those of not_another_try.
  asio::awaitable<Result<void>> admit(std::string serial);
  /// Counts a run that ended.
  void note(const RunOutcome& outcome);

  std::optional<OpenLotView> lot_view() const;
  TallyView tally() const;

 private:
  struct OpenLot {
    LotCard card;
    int sheet_revision = 0;
    int tested_before = 0;  ///< serials with a verdict when the line took the lot up
  };
  Result<void> may_run() const;
  asio::awaitable<std::optional<Body>> newest_of_lot(std::string lot, std::string kind);
  asio::awaitable<void> take_up(LotCard card);
  asio::awaitable<void> put(std::string kind, Body data);

  const Configuration& configuration_;
  LineServices& services_;
  std::optional<SignedIn> person_;
  std::optional<OpenLot> lot_;

  /// Production verdicts since the line began, by serial: the first one and the newest.
  struct Tested {
    std::optional<RunVerdict> first, newest;  ///< pass or fail
    std::string lot;
  };
  std::map<std::string, Tested> tested_;
  std::map<std::string, int> failing_;  ///< runs that failed by a check
  int voids_ = 0;
  std::optional<SteadyTime> first_end_, last_end_;
  int ends_ = 0;
};

}  // namespace probewright::sequence
