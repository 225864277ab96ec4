#include "capsigh/models/warming.hpp"

#include <cmath>

namespace capsigh {

MolarEnergy VanTHoffEnthalpy::operator()(MolalHenryConstant cold_k, Temperature cold,
                                         MolalHenryConstant warm_k, Temperature warm) const {
  const double slope =
      std::log(cold_k.value() / warm_k.value()) / (1.0 / cold.kelvin() - 1.0 / warm.kelvin());  // K
  return from_si<MolarEnergy>(-r.value() * slope);
}

}  // namespace capsigh
