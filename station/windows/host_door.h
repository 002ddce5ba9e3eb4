#pragma once
#include <QMetaObject>
#include <utility>

#include "station/sequence/line_host.h"
#include "station/windows/line/line_model.h"
#include "station/windows/line_door.h"
#include "station/windows/line_feed.h"

namespace probewright::windows {

/// The door to a running line. The host outlives it.
class HostDoor : public LineDoor {
 public:
  explicit HostDoor(sequence::LineHost& host) : host_(host) {}
  void request(sequence::LineRequest request) override { host_.request(std::move(request)); }
  std::shared_ptr<const sequence::LineView> view() const override { return host_.view(); }
  std::vector<sequence::ClosedLate> closed_late() const override { return host_.closed_late(); }

 private:
  sequence::LineHost& host_;
};

/// Lets the model hear all that the feed holds, each time there is something new.
class Pump {
 public:
  Pump(LineFeed* feed, LineModel& model) : feed_(feed), model_(model) {
    if (feed_)
      feed_->wake_by([this] {
        QMetaObject::invokeMethod(
            &model_, [this] { pump(); }, Qt::QueuedConnection);
      });
  }
  ~Pump() {
    if (feed_) feed_->wake_by({});
  }
  Pump(const Pump&) = delete;
  Pump& operator=(const Pump&) = delete;

 private:
  void pump() {
    LineFeed::Told told = feed_->take();
    for (const auto& event : told.events) model_.hear(event);
    if (told.view) model_.take(std::move(told.view));
    if (told.broken) model_.break_off(*told.broken);
  }
  LineFeed* feed_;
  LineModel& model_;
};

}  // namespace probewright::windows
