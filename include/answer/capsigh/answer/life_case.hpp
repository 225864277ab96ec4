// What a case knows of opening, conditioning and supply.
#pragma once

#include <boost/container/static_vector.hpp>
#include <optional>
#include <variant>

#include "capsigh/answer/content_case.hpp"
#include "capsigh/models/expansion.hpp"
#include "capsigh/models/fermentation.hpp"
#include "capsigh/models/nucleation.hpp"
#include "capsigh/models/solution.hpp"
#include "capsigh/quantity/thermal.hpp"

namespace capsigh {

inline constexpr std::size_t kMaxMoments = 10;  ///< times at which an open drink is looked at

/// How fast gas leaves the open drink.
struct EscapeCase {
  std::optional<Uncertain<Duration>> half_life;  ///< measured, or ...
  std::optional<Uncertain<Area>> surface;        ///< ... open surface, and
  CitedConstant<Velocity> transfer;              ///< the transfer coefficient of its stillness
  std::optional<CitedConstant<Fraction>> pour;   ///< share lost while the drink is poured
};

struct OpeningCase {
  std::optional<Uncertain<Temperature>> temperature;
  std::optional<EscapeCase> escape;
  boost::container::static_vector<Uncertain<Duration>, kMaxMoments> after;
  std::optional<Uncertain<Duration>> reclose_after;
  PerGas<CitedConstant<Fraction>> heat_ratio;  ///< c_p/c_v of each gas
  std::variant<Cited<WaterSurfaceTension>, CitedConstant<SurfaceTension>> tension;
  SublimationPressure sublimation;
};

template <class Visit>
void each_record_doubt(OpeningCase& o, Visit&& visit) {
  if (o.escape) visit(o.escape->transfer.doubt);
  if (o.escape && o.escape->pour) visit(o.escape->pour->doubt);
  for (auto& ratio : o.heat_ratio) visit(ratio.doubt);
  std::visit([&](auto& law) { visit(law.doubt); }, o.tension);
}

/// Carbonation by fermentation in the package.
struct ConditioningCase {
  CarbonDioxideOfSugar of_sugar;
  CitedConstant<MolarMass> sugar;
  CitedConstant<MolarMass> ethanol;
  Cited<EthanolWaterDensity> ethanol_density;
  std::optional<Uncertain<MassConcentration>> dose;            ///< none: found for `wanted`
  std::optional<ContentCase> wanted;                           ///< of the dose to be found
  std::optional<Uncertain<Temperature>> residual_temperature;  ///< open to CO2 at ambient, or ...
  std::optional<ContentCase> residual;  ///< ... its content; neither: at the contact's temperature
  std::optional<Uncertain<Fraction>> yield;
  CitedConstant<Fraction> assumed_yield;  ///< where none is given
};

template <class Visit>
void each_record_doubt(ConditioningCase& c, Visit&& visit) {
  visit(c.sugar.doubt);
  visit(c.ethanol.doubt);
  visit(c.ethanol_density.doubt);
  visit(c.assumed_yield.doubt);
}

/// Gas and heat for a run.
struct SupplyCase {
  std::optional<Uncertain<VolumeFlow>> flow;  ///< of liquid, or ...
  std::optional<Uncertain<Volume>> amount;
  PerGas<ContentCase> incoming;
  std::optional<Uncertain<Fraction>> purge;  ///< gas at ambient per brimful volume
  RecordDoubt enthalpy;                      ///< of solution, beside the Henry's constant
  CitedConstant<SpecificHeat> water;
  CitedConstant<SpecificHeat> alcohol;
  CitedConstant<SpecificHeat> solids;
};

template <class Visit>
void each_record_doubt(SupplyCase& s, Visit&& visit) {
  visit(s.enthalpy);
  visit(s.water.doubt);
  visit(s.alcohol.doubt);
  visit(s.solids.doubt);
}

}  // namespace capsigh
