#include "station/text/line_window.h"

namespace probewright::text {
namespace {

template <class Told>
std::function<void(Told)> both_of(std::function<void(Told)> first, std::function<void(Told)> second) {
  return [first = std::move(first), second = std::move(second)](Told told) {
    if (first) first(told);
    if (second) second(told);
  };
}

}  // namespace

sequence::LineHost::Listener both(sequence::LineHost::Listener first, sequence::LineHost::Listener second) {
  return {both_of(std::move(first.event), std::move(second.event)),
          both_of(std::move(first.view), std::move(second.view)),
          both_of(std::move(first.broken), std::move(second.broken))};
}

}  // namespace probewright::text
