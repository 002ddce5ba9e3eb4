#pragma once
#include "station/sequence/line_host.h"

namespace probewright::text {

/// A window over a running line. This layer knows no tool kit: main makes one where the program has windows and there
/// is a display. Main thread, but for the listener.
class LineWindow {
 public:
  virtual ~LineWindow() = default;
  /// What the line is to tell it; for LineHost::start, before open().
  virtual sequence::LineHost::Listener listener() = 0;
  /// Shows the line until a person closes the window; gives an exit status. The host goes on.
  virtual int open(sequence::LineHost& host) = 0;
  /// Closes it as a person would, if it is open. Any thread.
  virtual void close() = 0;
};

/// Both hear everything, the first one first.
sequence::LineHost::Listener both(sequence::LineHost::Listener first, sequence::LineHost::Listener second);

}  // namespace probewright::text
