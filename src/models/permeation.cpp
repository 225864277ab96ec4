#include "capsigh/models/permeation.hpp"

#include <cmath>

namespace capsigh {

Transmission TransmissionAt::operator()(Transmission reference, MolarEnergy activation,
                                        Temperature t, Temperature at) const {
  // Kernel: J/mol over J/(mol K), K.
  const double e = activation.value() / r.value();
  return reference * std::exp(-e * (1.0 / t.kelvin() - 1.0 / at.kelvin()));
}

}  // namespace capsigh
