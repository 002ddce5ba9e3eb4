#pragma once
#include <cstddef>
#include <string>
#include <vector>

#include "station/sequence/line_types.h"
#include "station/sequence/production/mistakes.h"

// What came of an operator's work, as the operator heard it from the line.
namespace probewright::sequence::production {

/// A run that the operator saw to its end.
struct Attempt {
  std::size_t piece = 0;  ///< place in the list of pieces
  std::string sat_there;  ///< serial of the probe that was really in that nest; the line knows nothing of it
  RunOutcome outcome;
};

/// A mistake and what the line said to it.
struct Blunder {
  Mistake mistake = Mistake::wrong_nest;
  std::size_t piece = 0;
  int nest = 0;                   ///< 0: it had to do with no nest
  bool made = false;              ///< false: there was no occasion for it
  bool taken = false;             ///< the line did what the mistaken scan asked for
  std::vector<std::string> told;  ///< the sentences, in order
};

/// A piece without a run of its own in this work, and the line's last word on it.
struct LeftOut {
  std::size_t piece = 0;
  std::string told;
};

struct Work {
  std::vector<Attempt> attempts;
  std::vector<Blunder> blunders;
  std::vector<LeftOut> left_out;
  std::vector<std::string> unrecorded;  ///< runs that the line could not put on record, in its words
  std::string trouble;                  ///< why the work ended before its end; empty: it did not
};

}  // namespace probewright::sequence::production
