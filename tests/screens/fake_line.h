#pragma once
#include <memory>
#include <vector>

#include "station/windows/line_door.h"

namespace probewright::windows {

/// A line that answers nothing and keeps what was asked of it. Tests hand its views and events to the model.
class FakeLine : public LineDoor {
 public:
  void request(sequence::LineRequest request) override { requests.push_back(std::move(request)); }
  std::shared_ptr<const sequence::LineView> view() const override { return std::make_shared<sequence::LineView>(now); }
  std::vector<sequence::ClosedLate> closed_late() const override { return late; }

  sequence::LineView now;
  std::vector<sequence::LineRequest> requests;
  std::vector<sequence::ClosedLate> late;
};

/// Readings of one run of the demonstration model, invented: typical values with a seeded spread. `dark_nA` is the dark
/// current, whose acceptance limit is 4.6 nA.
sequence::RunOutcome some_outcome(int nest, const std::string& serial, double dark_nA, unsigned seed);

/// A berth in each state, with marks, bar and plots of such readings.
sequence::BerthView empty_berth(int nest);
sequence::BerthView armed_berth(int nest, const std::string& serial, int left_s);
/// `share` of the run is done, 0 to 1.
sequence::BerthView running_berth(int nest, const std::string& serial, double share, unsigned seed);
sequence::BerthView ended_berth(const sequence::RunOutcome& outcome);
sequence::BerthView lost_berth(int nest);

/// A station in the middle of a lot. Nests go through the states in turn: passed, failed, running, armed, empty,
/// lost, void.
struct Scene {
  sequence::LineView view;
  std::vector<sequence::RunOutcome> outcomes;
};
Scene busy_scene(int nests);

}  // namespace probewright::windows
