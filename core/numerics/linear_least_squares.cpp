// Chronodrome, GPL-3.0-or-later.
#include <cmath>
#include <limits>

#include <Eigen/QR>
#include <Eigen/SVD>

#include "numerics/least_squares.h"

namespace chronodrome::numerics {

LinearFit solve_linear(const Matrix& design, const Vector& observed) {
  LinearFit fit;
  const Eigen::Index p = design.cols();
  if (p < 1 || design.rows() < 1 || design.rows() != observed.size()) return fit;

  // Unit columns, so that rank and condition do not depend on the units of the parameters.
  Vector length = design.colwise().norm();
  for (double& l : length) {
    if (!(l > 0.0)) l = 1.0;
  }
  const Matrix scaled = design * length.cwiseInverse().asDiagonal();
  Eigen::ColPivHouseholderQR<Matrix> qr(scaled);
  qr.setThreshold(1e-12);
  fit.rank = static_cast<int>(qr.rank());
  fit.coefficients = qr.solve(observed).cwiseQuotient(length);
  fit.residuals = observed - design * fit.coefficients;
  fit.rss = fit.residuals.squaredNorm();
  if (!fit.full_rank()) {
    fit.condition = std::numeric_limits<double>::infinity();
    return fit;
  }
  const Matrix r = qr.matrixR().topLeftCorner(p, p).template triangularView<Eigen::Upper>();
  const Eigen::JacobiSVD<Matrix> svd(r);
  fit.condition = svd.singularValues()(0) / svd.singularValues()(p - 1);
  const Matrix r_inverse = r.triangularView<Eigen::Upper>().solve(Matrix::Identity(p, p));
  const Matrix pivoted = qr.colsPermutation() * r_inverse;
  const Matrix half = length.cwiseInverse().asDiagonal() * pivoted;
  fit.inverse_normal = half * half.transpose();
  return fit;
}

} // namespace chronodrome::numerics
