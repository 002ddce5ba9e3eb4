#include "station/windows/line_feed.h"

#include <utility>

namespace probewright::windows {

template <class Change>
void LineFeed::put(Change change) {
  const std::lock_guard lock{guard_};
  change(told_);
  const bool first = !std::exchange(waits_, true);
  if (first && wake_) wake_();  // posts only
}

sequence::LineHost::Listener LineFeed::listener() {
  return {
      [this](const sequence::LineEvent& event) { put([&](Told& told) { told.events.push_back(event); }); },
      [this](std::shared_ptr<const sequence::LineView> view) { put([&](Told& told) { told.view = std::move(view); }); },
      [this](const std::string& what) { put([&](Told& told) { told.broken = what; }); },
  };
}

LineFeed::Told LineFeed::take() {
  const std::lock_guard lock{guard_};
  waits_ = false;
  return std::exchange(told_, {});
}

void LineFeed::wake_by(std::function<void()> wake) {
  const std::lock_guard lock{guard_};
  wake_ = std::move(wake);
  if (wake_ && waits_) wake_();
}

}  // namespace probewright::windows
