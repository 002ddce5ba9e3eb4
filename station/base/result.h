#pragma once
#include <boost/system/result.hpp>
#include <stdexcept>

#include "station/base/problem.h"

namespace probewright {

/// Thrown by Result::value() when there is no value; also used to carry a Problem out of a coroutine.
class ProblemError : public std::runtime_error {
 public:
  explicit ProblemError(Problem problem) : std::runtime_error(problem.text()), problem_(std::move(problem)) {}
  const Problem& problem() const { return problem_; }

 private:
  Problem problem_;
};

[[noreturn]] inline void throw_exception_from_error(const Problem& problem, const boost::source_location&) {
  throw ProblemError(problem);
}
[[noreturn]] inline void throw_exception_from_error(const Problems& problems, const boost::source_location&) {
  throw ProblemError(problems.empty() ? Problem{"our_bug", "", {{"what", "no problem named"}}} : problems.front());
}

/// A value or the problem that stood in its way.
template <class T>
using Result = boost::system::result<T, Problem>;

/// A value or every fault found, for documents that people write: all faults are told at once.
template <class T>
using ResultOrFaults = boost::system::result<T, Problems>;

}  // namespace probewright
