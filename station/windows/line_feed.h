#pragma once
#include <functional>
#include <memory>
#include <mutex>
#include <optional>
#include <string>
#include <vector>

#include "station/sequence/line_host.h"

namespace probewright::windows {

/// Carries what the line tells from its thread to the main thread. Made before the line, because the line begins to
/// tell at once; what comes before a window listens is kept. It outlives the line. Of views only the newest is kept;
/// events come all, in order.
class LineFeed {
 public:
  /// What has come since the last take().
  struct Told {
    std::vector<sequence::LineEvent> events;
    std::shared_ptr<const sequence::LineView> view;  ///< empty: none came
    std::optional<std::string> broken;
  };

  /// For LineHost::start.
  sequence::LineHost::Listener listener();
  /// Any thread.
  Told take();
  /// `wake` is called on the line thread when there is something to take after there was nothing; at once if there is
  /// something now. An empty one takes it back: once this returns it is called no more.
  void wake_by(std::function<void()> wake);

 private:
  template <class Change>
  void put(Change change);
  std::mutex guard_;
  Told told_;
  bool waits_ = false;  ///< something waits to be taken
  std::function<void()> wake_;
};

}  // namespace probewright::windows
