#pragma once
#include <string>

#include "station/base/result.h"

namespace probewright::sequence::production {

/// A probe that is going to be tested, and what was planted in it. The fault is for the handler and for reports made
/// afterwards: the operator never acts on it, and the line never sees it.
struct Piece {
  std::string serial;
  std::string model;
  std::string fault;      ///< the emulated bench's name for it; empty: nothing was planted
  double severity = 1.0;  ///< above 0, at most 1
};

/// Hands at a bench: what a person does to a nest without telling the line. The emulated bench in this process, or one
/// behind its control socket; main brings it. Called on the thread of the operator who owns the hands.
class ProbeHandler {
 public:
  virtual ~ProbeHandler() = default;
  /// Puts the probe into an empty nest and plugs it in.
  virtual Result<void> seat(int nest, const Piece& piece) = 0;
  /// Takes out what sits in the nest.
  virtual Result<void> remove(int nest) = 0;
  virtual Result<void> lid(int nest, bool open) = 0;
};

}  // namespace probewright::sequence::production
