#pragma once
#include <functional>
#include <memory>
#include <vector>

#include "station/sequence/production/emulated_operator.h"

namespace probewright::sequence::production {

/// An emulated operator in a thread of its own, in real time, beside a line in another.
class OperatorThread {
 public:
  /// `ask` and `ended` are called on the operator's thread: `ask` hands a request to the line, `ended` comes once, when
  /// the work is over. The handler outlives this.
  OperatorThread(ProbeHandler& handler, std::function<void(LineRequest)> ask, std::function<void()> ended,
                 OperatorSettings settings, std::vector<Piece> pieces);
  /// stop(), then waits.
  ~OperatorThread();
  OperatorThread(const OperatorThread&) = delete;
  OperatorThread& operator=(const OperatorThread&) = delete;

  /// Begins the work, once. Any thread.
  void start();
  /// What the line told, from its start on, also before start(). Any thread; does not block.
  void hear(LineEvent event);
  /// No more scans; what runs is taken out when its end is told. Any thread.
  void stop();
  /// Waits for the end of the work. One thread, which is not the operator's.
  const Work& wait();

 private:
  struct Inside;
  std::unique_ptr<Inside> inside_;
};

}  // namespace probewright::sequence::production
