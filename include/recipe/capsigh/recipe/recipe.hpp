// A recipe as typed, located quantities. What a recipe leaves out is what it wants to know. Names
// of gases and liquids stay text here; the answer room knows which exist.
#pragma once

#include <optional>
#include <string>
#include <utility>
#include <variant>
#include <vector>

#include "capsigh/document/document.hpp"
#include "capsigh/quantity/finding.hpp"
#include "capsigh/quantity/flows.hpp"
#include "capsigh/quantity/grammar.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

/// Text with its place.
struct LocatedText {
  std::string text;
  Place place;
};

/// A quantity as given: its value, the limit of error or tolerance behind ±, and where it stands. A
/// key that is present but unreadable has no value; it still counts as present.
template <class Q>
struct Given {
  std::optional<Q> value;
  std::optional<Difference<Q>> plus_minus;
  LocatedText source;
};

/// A pressure as read: absolute or gauge.
struct GivenPressure {
  std::variant<std::monostate, Pressure, GaugePressure> value;
  std::optional<Pressure> plus_minus;
  LocatedText source;

  [[nodiscard]] bool readable() const { return value.index() != 0; }
};

/// How a content is expressed. The number behind it is in SI units of that measure.
enum class ContentMeasure {
  volumes,               ///< volumes of gas per volume of degassed liquid, 1
  mass_concentration,    ///< kg/m³ of degassed liquid at 20 °C
  amount_concentration,  ///< mol/m³ of degassed liquid at 20 °C
  molality,              ///< mol/kg of degassed liquid
  mass_fraction,         ///< kg/kg of degassed liquid
};

/// The content of one gas.
struct GivenContent {
  LocatedText gas;
  ContentMeasure measure = ContentMeasure::volumes;
  Given<Fraction> amount;  ///< the number in SI units of the measure
};

/// One line of [gas]: a share of the dry gas, or "rest".
struct GivenShare {
  LocatedText name;
  bool rest = false;
  bool find = false;  ///< "find": solved for, so that the target is held
  Given<Fraction> share;
};

/// What a specification says of one gas.
struct GivenTarget {
  GivenContent content;
  bool is_maximum = false;  ///< { max = "..." }
  bool is_minimum = false;  ///< { min = "..." }
};

/// How a solute's amount is expressed; the number behind it is in SI units of that measure.
enum class GivenSoluteMeasure {
  mass_fraction,
  volume_fraction,
  mass_concentration,
  amount_concentration,
};

/// One solute of the liquid: an organic by its key, or a salt by its formula.
struct GivenSolute {
  LocatedText name;
  bool salt = false;
  GivenSoluteMeasure measure = GivenSoluteMeasure::mass_fraction;
  Given<Fraction> amount;
};

struct LiquidSection {
  Place place;
  std::optional<LocatedText> like;
  std::optional<LocatedText> basis;
  std::optional<LocatedText> relation;
  std::optional<LocatedText> volume_basis;
  std::vector<GivenSolute> solutes;
  std::optional<Given<MassDensity>> density;
};

struct ContactSection {
  Place place;
  std::optional<Given<Temperature>> temperature;
  std::optional<GivenPressure> pressure;
  std::vector<GivenContent> dissolved;
  std::optional<Place> dissolved_place;
  std::optional<Given<Length>> altitude;
  std::optional<Given<Pressure>> ambient;
  std::optional<Given<Length>> depth;
  std::optional<Given<Fraction>> approach;
};

/// What passes the wall of a package, of one gas: its volume at 0 °C and 101.325 kPa per time.
struct GivenTransmission {
  LocatedText gas;
  Given<Transmission> amount;
};

struct ContainerSection {
  Place place;
  std::optional<Given<Volume>> brimful;
  std::optional<Given<Volume>> fill;
  std::optional<Given<Mass>> fill_mass;
  std::optional<GivenPressure> rated;
  std::optional<Given<Temperature>> closing_temperature;
  std::optional<GivenPressure> closing_pressure;
  std::optional<Given<Fraction>> closing_air;
  std::optional<Given<Volume>> closing_air_volume;
  std::optional<GivenContent> closing_oxygen;  ///< dissolved in the liquid
  std::vector<GivenContent> filling_loss;
  std::optional<Given<Mass>> nitrogen_dose;
  std::optional<LocatedText> kind;
  std::optional<Given<Compliance>> stretch;
  std::vector<Given<Temperature>> storage;
  std::optional<Given<Fraction>> minimum_ullage;
  std::vector<GivenTransmission> wall;
  std::vector<GivenContent> limit;
};

struct OpeningSection {
  Place place;
  std::optional<Given<Temperature>> temperature;
  std::optional<Given<Duration>> escape_half_life;
  std::optional<Given<Area>> surface;
  std::optional<LocatedText> stillness;
  std::vector<Given<Duration>> after;
  std::optional<Place> after_place;
  std::optional<Given<Duration>> reclose_after;
};

/// Carbonation by fermentation in the package.
struct ConditioningSection {
  Place place;
  std::optional<LocatedText> sugar;
  std::optional<Given<MassConcentration>> dose;
  std::optional<LocatedText> find;  ///< dose = "find"
  std::optional<Given<Temperature>> residual_temperature;
  std::vector<GivenContent> residual;
  std::optional<Place> residual_place;
  std::optional<Given<Fraction>> yield;
};

/// Gas and heat for a run.
struct SupplySection {
  Place place;
  std::optional<Given<VolumeFlow>> flow;
  std::optional<Given<Volume>> amount;
  std::vector<GivenContent> incoming;
  std::optional<Place> incoming_place;
  std::optional<Given<Fraction>> purge;  ///< gas at ambient blown through, per brimful volume
};

/// How targets and limits are judged.
struct JudgingSection {
  Place place;
  std::optional<LocatedText> rule;  ///< "guarded" or "simple"
  std::optional<Given<Fraction>> risk;
};

/// A column of a file of readings and what it holds: "Temp (F)" = "temperature [degF]".
struct GivenColumn {
  LocatedText header;
  LocatedText meaning;
};

/// How readings are charted: the other keys of [judging].
struct ChartingSection {
  std::optional<std::size_t> subgroup;         ///< consecutive rows, or ...
  std::optional<LocatedText> subgroup_column;  ///< rows with the same text in that column
  std::optional<Place> subgroup_place;
  std::vector<LocatedText> group_by;  ///< names of columns
  std::vector<GivenColumn> columns;
  std::optional<GivenContent> centre;  ///< established earlier: of the process in control ...
  std::optional<GivenContent> sigma;   ///< ... and the standard deviation of its single values
};

/// The instruments behind readings.
struct GaugeSection {
  Place place;
  std::optional<Given<Pressure>> pressure;  ///< zero ± its limit of error
  std::optional<Given<TemperatureDifference>> temperature;
  std::optional<Given<Pressure>> pressure_offset;  ///< from calibration: added to the reading
  std::optional<Given<TemperatureDifference>> temperature_offset;
  std::optional<Given<Pressure>> graduation;
  std::optional<Given<Volume>> piercer_volume;
  std::optional<LocatedText> piercer_gas;
};

/// The temperatures of an operator's card.
struct CardSection {
  Place place;
  std::optional<Given<Temperature>> from;
  std::optional<Given<Temperature>> to;
  std::optional<Given<TemperatureDifference>> step;
};

struct Recipe {
  std::string file;
  bool readable = true;  ///< false if some value could not be read; it still counts as given
  std::string title;
  std::vector<std::pair<std::string, std::string>> about;  ///< carried into every output
  std::optional<LiquidSection> liquid;
  std::vector<GivenShare> gas;
  std::optional<Place> gas_place;
  std::optional<ContactSection> contact;
  std::vector<GivenTarget> target;
  std::optional<LocatedText> target_at;  ///< "contact" or "package"
  std::optional<ContainerSection> container;
  std::optional<OpeningSection> opening;
  std::optional<JudgingSection> judging;
  std::optional<ConditioningSection> conditioning;
  std::optional<SupplySection> supply;
  ChartingSection charting;
  std::optional<GaugeSection> gauge;
  std::optional<CardSection> card;
  std::vector<std::pair<std::string, std::string>> inputs;  ///< as understood: key and text
};

/// Reads a parsed document; reports every fault of the recipe, not only the first.
Outcome<Recipe> read_recipe(const Node& document, const std::string& file);

}  // namespace capsigh
