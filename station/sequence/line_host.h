#pragma once
#include <functional>
#include <memory>
#include <string>
#include <vector>

#include "station/base/result.h"
#include "station/sequence/configuration.h"
#include "station/sequence/ledger_start.h"
#include "station/sequence/line_services.h"
#include "station/sequence/line_view.h"

namespace probewright::sequence {

struct LineHostOptions {
  std::string ledger;  ///< path; empty: where the station file says
  std::string ports;   ///< folder of the ports instead of the station file's; empty: none
  Software software;
  double views_per_s = 30.0;  ///< how often a view may be published; 0: never
};

/// The line in its own thread, with its ledger thread: what commands and windows hold. Its doors are LineRequest,
/// LineEvent and LineView. All functions may be called from any thread.
class LineHost {
 public:
  /// Called on the line thread; must not block.
  struct Listener {
    std::function<void(const LineEvent&)> event;
    std::function<void(std::shared_ptr<const LineView>)> view;
    /// The line ended by a mistake of our own; nothing more comes.
    std::function<void(const std::string& what)> broken;
  };

  /// Opens the ledger (closing runs that the last line left open), then starts the line. `configuration` is kept.
  /// Errors: those of start_ledger, zone_unknown.
  static Result<std::unique_ptr<LineHost>> start(Configuration configuration, LineHostOptions options,
                                                 Listener listener);
  /// finish("the station") unless it was finished before.
  ~LineHost();
  LineHost(const LineHost&) = delete;
  LineHost& operator=(const LineHost&) = delete;

  /// Asks; the answer comes as events (Answered, NestChanged ...) and in the next view.
  void request(LineRequest request);
  /// The newest view; never null.
  std::shared_ptr<const LineView> view() const;
  /// Stops all runs in `who`'s name, waits until all are closed on disk and the line has ended.
  void finish(const std::string& who);

  const Configuration& configuration() const;
  /// Runs that the start closed.
  const std::vector<ClosedLate>& closed_late() const;
  std::string ledger_path() const;

 private:
  struct Inside;
  explicit LineHost(std::unique_ptr<Inside> inside);
  std::unique_ptr<Inside> inside_;
};

}  // namespace probewright::sequence
