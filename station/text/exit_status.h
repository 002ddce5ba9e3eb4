#pragma once

namespace probewright::text {

/// How a command ends. Scripts build on these numbers.
enum ExitStatus : int {
  done = 0,          ///< it did what was asked, and the answer is yes where there is one
  answer_is_no = 1,  ///< a fail or void, a broken chain, an unknown serial, a spectrum that cannot be used
  wrong_use = 2,     ///< a wrong option, or input that was refused
  could_not = 3      ///< a lost device, trouble with the ledger, a mistake in this program
};

}  // namespace probewright::text
