#pragma once
#include "station/base/times.h"

namespace probewright::wire {

/// What a port does with a read whose deadline has passed before it began. Bytes that already stand there are given
/// once, so that a hiccup of the machine costs nothing; but only once per deadline, so that a line that babbles
/// without end cannot keep its reader past the deadline for ever.
class LateGrace {
 public:
  bool allows(SteadyTime now, SteadyTime deadline) {
    if (now <= deadline) return true;
    const bool used = deadline <= used_;
    used_ = deadline;
    return !used;
  }

 private:
  SteadyTime used_{Duration::min()};
};

}  // namespace probewright::wire
