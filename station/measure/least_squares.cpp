#include "station/measure/least_squares.h"

#include <Eigen/QR>
#include <algorithm>
#include <cmath>

namespace probewright::measure {
namespace {

using Matrix = Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, Eigen::RowMajor>;
using Vector = Eigen::VectorXd;

Problem impossible(std::string_view why) { return {"fit_impossible", "", {{"reason", std::string{why}}}}; }

bool all_finite(std::span<const double> values) {
  return std::all_of(values.begin(), values.end(), [](double v) { return std::isfinite(v); });
}

std::vector<double> to_std(const Vector& v) { return {v.data(), v.data() + v.size()}; }

}  // namespace

Result<LinearFit> fit_linear(std::span<const double> design, std::size_t p, std::span<const double> values,
                             std::span<const double> weights) {
  const std::size_t n = values.size();
  if (p == 0 || n < p) return impossible("fewer values than coefficients");
  if (design.size() != n * p || (!weights.empty() && weights.size() != n)) return impossible("lengths differ");
  if (!all_finite(design) || !all_finite(values) || !all_finite(weights)) return impossible("a value is not finite");

  const auto rows = static_cast<Eigen::Index>(n), columns = static_cast<Eigen::Index>(p);
  const Eigen::Map<const Matrix> a(design.data(), rows, columns);
  const Eigen::Map<const Vector> y(values.data(), rows);
  const Vector w = weights.empty() ? Vector::Ones(rows) : Vector(Eigen::Map<const Vector>(weights.data(), rows));
  if ((w.array() < 0.0).any()) return impossible("a weight is negative");
  const Vector root = w.cwiseSqrt();

  // Columns of very different size (a time in s beside its cube) must not look dependent: each is scaled to length 1.
  Matrix scaled = root.asDiagonal() * a;
  const Eigen::RowVectorXd size = scaled.colwise().norm();
  if ((size.array() <= 0.0).any()) return impossible("a column is zero");
  const Eigen::RowVectorXd inverse_size = size.cwiseInverse();
  scaled = scaled * inverse_size.asDiagonal();
  const Eigen::ColPivHouseholderQR<Matrix> qr(scaled);
  if (qr.rank() < columns) return impossible("the columns are not independent");

  const Vector b = inverse_size.transpose().cwiseProduct(qr.solve(root.cwiseProduct(y)));
  const Vector residual = y - a * b;
  // gain: coefficients = gain * values. (scaled' scaled)^-1 = P R^-1 R^-T P'.
  const Matrix r_inverse = qr.matrixR()
                               .topLeftCorner(columns, columns)
                               .triangularView<Eigen::Upper>()
                               .solve(Matrix(Matrix::Identity(columns, columns)));
  const Matrix half = inverse_size.transpose().asDiagonal() * (qr.colsPermutation() * r_inverse);
  const Matrix gain = half * (half.transpose() * (a.transpose() * w.asDiagonal()));
  const Matrix spread = gain * gain.transpose();
  // E[sum w r^2] = sd^2 (sum w - trace(A' W gain')) for white noise, since r = (1 - A gain) noise and W A gain is
  // symmetric.
  const double freedom = w.sum() - (w.asDiagonal() * a).cwiseProduct(gain.transpose()).sum();
  const double sum = (w.array() * residual.array().square()).sum();
  const double variance = freedom > 1e-9 * w.sum() ? sum / freedom : 0.0;

  LinearFit fit;
  fit.coefficients = to_std(b);
  fit.residuals = to_std(residual);
  fit.noise_sd = std::sqrt(variance);
  const Matrix covariance = variance * spread;
  fit.covariance.assign(covariance.data(), covariance.data() + covariance.size());
  return fit;
}

}  // namespace probewright::measure
