#include "capsigh/models/sechenov.hpp"

#include <cmath>

namespace capsigh {

HenryConstant SechenovEquation::operator()(HenryConstant in_water, Fraction exponent) const {
  return in_water * std::pow(10.0, -exponent.value());
}

}  // namespace capsigh
