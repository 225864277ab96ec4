// Everything a solution depends on, in one flat value: the medium with its records' doubts, the
// recipe's inputs with theirs. No names are looked up any more; no ranges are judged yet.
#pragma once

#include <optional>

#include "capsigh/answer/life_case.hpp"
#include "capsigh/answer/package_case.hpp"
#include "capsigh/balance/medium.hpp"
#include "capsigh/models/atmosphere.hpp"
#include "capsigh/quantity/uncertain.hpp"
#include "capsigh/recipe/recipe.hpp"

namespace capsigh {

/// The ambient pressure: stated, or by the standard atmosphere from an altitude.
struct AmbientCase {
  std::optional<Uncertain<Length>> altitude;
  StandardAtmosphere atmosphere;
  Uncertain<Pressure> stated;  ///< where there is no altitude
};

/// One line of the headspace's composition: a gas or a mixture, its share, and how that splits over
/// the medium's gases. The line that takes the rest has an unused share.
struct ShareLine {
  std::string name;
  Uncertain<Fraction> share;
  bool rest = false;
  bool find = false;  ///< its share is solved for
  Shares parts;
};

/// Which two of temperature, pressure and content are given; the third is solved for.
enum class Known { temperature_pressure, temperature_content, pressure_content };

struct ContactCase {
  Known known = Known::temperature_pressure;
  std::optional<Uncertain<Temperature>> temperature;
  std::optional<Uncertain<GaugePressure>> gauge_pressure;  ///< or ...
  std::optional<Uncertain<Pressure>> absolute_pressure;
  std::optional<ContentCase> content;
  PerGas<ShareLine> gas;
  std::optional<Uncertain<Length>> depth;       ///< liquid above the point of contact
  std::optional<Uncertain<Fraction>> approach;  ///< of saturation actually reached
};

/// The instruments behind readings of a package, and what the piercer brings.
struct GaugeCase {
  Uncertain<Pressure> pressure;  ///< error of the gauge: zero, with its doubt
  Uncertain<TemperatureDifference> temperature;
  Uncertain<Pressure> pressure_offset;  ///< added to the reading
  Uncertain<TemperatureDifference> temperature_offset;
  std::optional<Uncertain<Volume>> dead;  ///< of the piercer
  Shares dead_gas;                        ///< what it holds at ambient pressure; all zero: nothing
};

struct Case {
  Medium medium;
  AmbientCase ambient;
  ContactCase contact;
  PerGas<ContentCase> targets;
  std::optional<ContainerCase> container;
  std::optional<OpeningCase> opening;
  std::optional<ConditioningCase> conditioning;
  std::optional<SupplyCase> supply;
  std::optional<GaugeCase> gauge;
  PerGas<std::uint8_t> in_contact;    ///< whether a gas belongs to the headspace at the contact
  PerGas<std::uint8_t> in_container;  ///< whether it belongs to the closed package
  Shares air;                         ///< of the room and of air in a headspace
  bool ideal_volumes = false;
  bool target_at_package = false;  ///< targets hold after the closed package has settled
  Acceleration gravity{};
  bool classed_by_gauge = false;     ///< a wine: its gauge pressure at 20 °C is asked for
  bool content_from_target = false;  ///< the contact's content is a target's
};

/// Calls visit(RecordDoubt&) for every record's doubt of the case.
template <class Visit>
void each_record_doubt(Case& c, Visit&& visit) {
  each_record_doubt(c.medium, visit);
  if (c.opening) each_record_doubt(*c.opening, visit);
  if (c.conditioning) each_record_doubt(*c.conditioning, visit);
  if (c.supply) each_record_doubt(*c.supply, visit);
}

/// The dry composition at the contact at the current z, adding up to one. `found` is the share of
/// the line that is solved for.
Shares contact_shares(const Case& c, Fraction found = {});

/// Every doubt of the case that is not zero, each with the z that moves it: inputs by their keys,
/// records by theirs. Pointers stay valid as long as the case does.
std::vector<Doubt> each_doubt(Case& c);

}  // namespace capsigh
