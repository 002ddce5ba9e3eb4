#include "limits/statistics/student.h"

#include <boost/math/distributions/students_t.hpp>
#include <cmath>
#include <stdexcept>

#include "limits/statistics/normal.h"

namespace probewright::limits::statistics {

double student_quantile(double p, double degrees_of_freedom) {
  if (!(p > 0.0 && p < 1.0))
    throw std::domain_error("a quantile is asked for a probability that is not between 0 and 1");
  if (!(degrees_of_freedom > 0.0)) throw std::domain_error("degrees of freedom must be above 0");
  if (std::isinf(degrees_of_freedom)) return normal_quantile(p);
  return boost::math::quantile(boost::math::students_t{degrees_of_freedom}, p);
}

double coverage_factor(double coverage, double degrees_of_freedom) {
  return student_quantile(0.5 + 0.5 * coverage, degrees_of_freedom);
}

}  // namespace probewright::limits::statistics
