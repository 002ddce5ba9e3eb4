#pragma once
#include <cstddef>
#include <deque>
#include <utility>

namespace probewright::emulated {

/// What was in force when: a short history of one setting, in device seconds. The converter hands out its samples in
/// blocks, so it asks for moments that lie a little in the past, after the setting may have changed again.
template <class T>
class Timeline {
 public:
  explicit Timeline(T at_start) { changes_.emplace_back(-1e300, std::move(at_start)); }

  /// `value` holds from `time_s` on. Times must not fall.
  void set(double time_s, T value) {
    changes_.emplace_back(time_s, std::move(value));
    if (changes_.size() > kept) changes_.pop_front();
  }

  /// What held at `time_s`; the oldest kept value for moments before it.
  const T& at(double time_s) const { return entry_at(time_s).second; }
  const T& latest() const { return changes_.back().second; }
  double since(double time_s) const { return entry_at(time_s).first; }

 private:
  static constexpr std::size_t kept = 64;

  const std::pair<double, T>& entry_at(double time_s) const {
    for (auto entry = changes_.rbegin(); entry != changes_.rend(); ++entry) {
      if (entry->first <= time_s) return *entry;
    }
    return changes_.front();
  }

  std::deque<std::pair<double, T>> changes_;
};

}  // namespace probewright::emulated
