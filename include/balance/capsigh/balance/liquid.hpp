// What the liquid is made of, resolved at the current doubts: density, mole fractions and the
// concentrations that salt gases out.
//
// One litre of degassed liquid at 20 °C: masses of water, ethanol, sugars, other organics and
// salts, whose volumes add up (ethanol–water by OIML R22, sugars by the sucrose gravity, others by
// apparent volumes). A measured density overrides the sum.
#pragma once

#include <boost/container/static_vector.hpp>
#include <optional>
#include <string_view>

#include "capsigh/constants/cited.hpp"
#include "capsigh/models/sechenov.hpp"
#include "capsigh/models/solution.hpp"
#include "capsigh/models/vapour.hpp"
#include "capsigh/quantity/uncertain.hpp"

namespace capsigh {

inline constexpr std::size_t kMaxSolutes = 24;
inline constexpr std::size_t kMaxIons = 24;
template <class T>
using PerSolute = boost::container::static_vector<T, kMaxSolutes>;
template <class T>
using PerIon = boost::container::static_vector<T, kMaxIons>;

/// What a solute's volume follows.
enum class SoluteKind { ethanol, sugar, other, salt };

/// How its amount is given; the number is in SI units of the measure.
enum class SoluteMeasure {
  mass_fraction,         ///< of the liquid, kg/kg
  volume_fraction,       ///< at 20 °C (ethanol)
  mass_concentration,    ///< kg/m³ at 20 °C
  amount_concentration,  ///< mol/m³ at 20 °C
};

/// One ion of the liquid.
struct IonModel {
  std::string_view name;
  CitedConstant<MolarVolume> h;  ///< ion's part of the Sechenov constant
};

/// One dissolved substance: laws and amount.
struct SoluteModel {
  std::string_view name;
  SoluteKind kind = SoluteKind::other;
  SoluteMeasure measure = SoluteMeasure::mass_fraction;
  Uncertain<Fraction> amount;
  bool assumed = false;  ///< a default of the named liquid
  CitedConstant<MolarMass> molar_mass;
  CitedConstant<SpecificVolume> apparent_volume;  ///< of others and salts
  Cited<OrganicSalting> salting;                  ///< of organics, for CO2
  /// Of a salt: its ions (index into LiquidModel::ions) and how many a formula unit.
  boost::container::static_vector<std::pair<std::size_t, double>, 4> ions;
};

/// Every law of the liquid, and its composition. Laws that are not in use have no record.
struct LiquidModel {
  Cited<WaterVapourPressure> water_vapour;
  Cited<WaterDensity> water_density;
  CitedConstant<MolarMass> water_molar_mass;
  Cited<EthanolVapourPressure> ethanol_vapour;
  VanLaar van_laar;
  RecordDoubt van_laar_doubt;
  Cited<EthanolWaterDensity> ethanol_density;
  Cited<SucroseGravity> sugar_gravity;
  PerSolute<SoluteModel> solutes;
  PerIon<IonModel> ions;
  std::optional<Uncertain<MassDensity>> measured_density;  ///< at 20 °C
  RecordDoubt other_gases;  ///< organics salt other gases out like CO2, with this doubt
  RecordDoubt model;        ///< what composition leaves open in fermented drinks
};

template <class Visit>
void each_record_doubt(LiquidModel& l, Visit&& visit) {
  visit(l.water_vapour.doubt);
  visit(l.water_density.doubt);
  visit(l.water_molar_mass.doubt);
  visit(l.ethanol_vapour.doubt);
  visit(l.van_laar_doubt);
  visit(l.ethanol_density.doubt);
  visit(l.sugar_gravity.doubt);
  for (auto& s : l.solutes) {
    visit(s.molar_mass.doubt);
    visit(s.apparent_volume.doubt);
    visit(s.salting.doubt);
  }
  for (auto& ion : l.ions) visit(ion.h.doubt);
  visit(l.other_gases);
  visit(l.model);
}

/// The liquid resolved; all per cubic metre of degassed liquid at 20 °C.
struct Liquid {
  MassDensity density{};       ///< at 20 °C
  double expansion = 1;        ///< measured density over the sum of volumes
  double pair_mass = 0;        ///< water and ethanol, kg
  double other_volume = 0;     ///< of everything else, m³
  Fraction ethanol_in_pair{};  ///< by mass
  Fraction x_water{};          ///< mole fractions, ions counted
  Fraction x_ethanol{};
  double x_ethanol_in_pair = 0;
  Molality particles{};  ///< mol of everything per kg of liquid
  Fraction ethanol_by_volume{};
  MassConcentration sugar{};
  PerSolute<AmountConcentration> solutes;
  PerIon<AmountConcentration> ions;
};

/// Resolves the composition at the current z of its doubts. `twenty` is 20 °C.
Liquid compose(const LiquidModel& model, Temperature twenty, Trace* trace = nullptr);

/// Density of the degassed liquid at T.
MassDensity liquid_density(const LiquidModel& model, const Liquid& liquid, MassDensity water,
                           MassDensity water_twenty, Temperature t, Temperature twenty,
                           Trace* trace = nullptr);

/// ρ(T) = ρ20 V20/V(T). An identity.
struct SolutionDensity {
  static constexpr LawInfo<2> info{
      "density of the solution", "rho = rho20 V20/V(T)", {"rho20", "V20/V(T)"}, "rho"};
  MassDensity operator()(MassDensity at_twenty, Fraction ratio) const { return at_twenty * ratio; }
};

/// Activity coefficients as steps of a trace.
struct VanLaarWater {
  VanLaar law;
  static constexpr LawInfo<1> info{"activity of water beside ethanol (van Laar)",
                                   "ln g_w = A21/(1 + A21 x_w/(A12 x_e))^2",
                                   {"x_e"},
                                   "g_w"};
  Fraction operator()(Fraction x_ethanol) const { return law.water(x_ethanol.value()); }
};
struct VanLaarEthanol {
  VanLaar law;
  static constexpr LawInfo<1> info{"activity of ethanol beside water (van Laar)",
                                   "ln g_e = A12/(1 + A12 x_e/(A21 x_w))^2",
                                   {"x_e"},
                                   "g_e"};
  Fraction operator()(Fraction x_ethanol) const { return law.ethanol(x_ethanol.value()); }
};

/// Vapour of the liquid: of water and of ethanol, and what pure water would have.
struct VapourAt {
  Pressure pure_water{};
  Pressure water{};
  Pressure ethanol{};
  [[nodiscard]] Pressure total() const { return water + ethanol; }
};
VapourAt vapour_at(const LiquidModel& model, const Liquid& liquid, Temperature t,
                   Trace* trace = nullptr);

/// Σ s of the Sechenov equation for one gas. `co2` tells whether the organics' constants are its
/// own.
Fraction salting_exponent(const LiquidModel& model, const Liquid& liquid,
                          const Cited<GasSalting>& gas, bool co2, Temperature t,
                          Trace* trace = nullptr);

}  // namespace capsigh
