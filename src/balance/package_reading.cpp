#include "capsigh/balance/package_reading.hpp"

#include "capsigh/models/real_gas.hpp"

namespace capsigh {

Volume room_for_air(const PackageAt& package, Volume dead) {
  return package.headspace + dead + package.air_ostwald * package.liquid;
}

Amount gas_amount(const PackageAt& package, Pressure partial, Volume volume) {
  const auto z = Compressibility{package.r}(package.b_gas, partial, package.t);
  return GasInHeadspace{package.r}(partial + package.vapour, package.vapour, volume, z, package.t);
}

}  // namespace capsigh
