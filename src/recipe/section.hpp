// Reading the keys of one section: what is asked for is known, what remains is an error.
#pragma once

#include <functional>
#include <span>
#include <string>
#include <vector>

#include "capsigh/recipe/recipe.hpp"

namespace capsigh::recipe_detail {

/// What is physically possible for a quantity of a key, beyond its unit.
enum class Sign { any, positive, not_negative };

/// One section while it is read. Every take() makes a key known; finish() reports the rest.
class Section {
 public:
  Section(const Node& table, std::string name, Recipe& recipe, Findings& findings)
      : table_(table), name_(std::move(name)), recipe_(recipe), findings_(findings) {}

  const Member* take(const std::string& key);
  void finish();

  std::optional<Given<Temperature>> temperature(const std::string& key, std::string_view example);
  std::optional<GivenPressure> pressure(const std::string& key, std::string_view example);
  std::optional<Given<Pressure>> absolute_pressure(const std::string& key,
                                                   std::string_view example);
  std::optional<Given<Volume>> volume(const std::string& key, std::string_view example);
  std::optional<Given<Length>> length(const std::string& key, std::string_view example, Sign sign);
  std::optional<Given<Fraction>> share(const std::string& key, std::string_view example,
                                       Sign sign = Sign::not_negative);
  std::optional<LocatedText> text(const std::string& key, std::string_view example);
  std::optional<Given<Mass>> mass(const std::string& key, std::string_view example);
  std::optional<Given<Duration>> duration(const std::string& key, std::string_view example,
                                          Sign sign);
  /// A list of times, or one.
  std::vector<Given<Duration>> durations(const Member& member, std::string_view example);
  std::optional<Given<Area>> area(const std::string& key, std::string_view example);
  std::optional<Given<VolumeFlow>> volume_flow(const std::string& key, std::string_view example,
                                               Sign sign = Sign::positive);
  std::optional<Given<MassConcentration>> mass_concentration(const std::string& key,
                                                             std::string_view example);
  /// A share that may be more than the whole.
  std::optional<Given<Fraction>> multiple(const std::string& key, std::string_view example);
  /// A key that is a share of the headspace or a volume: whichever it is is filled.
  void air(const std::string& key, std::optional<Given<Fraction>>& share,
           std::optional<Given<Volume>>& volume);
  std::optional<GivenContent> content_of(const std::string& key, const std::string& gas);
  std::vector<GivenTarget> targets();
  std::optional<Given<MassDensity>> density(const std::string& key, std::string_view example);
  std::optional<GivenSolute> solute(const std::string& key);
  /// Every key of this section as an amount of the salt it names.
  std::vector<GivenSolute> salts();
  /// Every key of this section as a content of the gas it names.
  std::vector<GivenContent> contents();
  /// A key that is a list of temperatures, or one of them.
  std::vector<Given<Temperature>> temperatures(const std::string& key, std::string_view example);
  std::optional<Given<Compliance>> stretch(const std::string& key, std::string_view example);
  /// Every key of this section as what passes a wall of the gas it names.
  std::vector<GivenTransmission> transmissions();
  /// Every key of this section as a share of the gas it names.
  std::vector<GivenShare> shares();
  /// What an instrument may be off: "± 0.02 bar". The value is zero.
  std::optional<Given<Pressure>> pressure_error(const std::string& key, std::string_view example);
  std::optional<Given<TemperatureDifference>> temperature_error(const std::string& key,
                                                                std::string_view example);
  /// Differences, with or without ±.
  std::optional<Given<Pressure>> pressure_step(const std::string& key, std::string_view example,
                                               Sign sign);
  std::optional<Given<TemperatureDifference>> temperature_step(const std::string& key,
                                                               std::string_view example, Sign sign);
  /// The keys of [judging] that are about readings.
  ChartingSection charting();
  /// The table behind a key of this section; a complaint if it is something else.
  const Node* table(const std::string& key);
  /// The { } group behind a key; a complaint if it is something else.
  const Node* group(const std::string& key, const std::string& example);
  /// A section of its own for a table inside this one.
  Section inside(const Node& table, std::string name) {
    return {table, std::move(name), recipe_, findings_};
  }
  /// Every key of this section as free text.
  std::vector<std::pair<std::string, std::string>> free_text();

  void complain(const Place& place, std::string code, std::string message, std::string expected,
                std::string example);

 private:
  std::optional<ParsedQuantity> quantity(const Member& member,
                                         std::span<const Dimension> dimensions,
                                         std::string_view example, bool absolute_by_nature,
                                         Sign sign);
  template <class Q>
  std::optional<Given<Q>> taken(const std::string& key, Dimension dimension,
                                std::string_view example, Sign sign);
  template <class Q>
  Given<Q> given(const Member& member, Dimension dimension, std::string_view example,
                 bool absolute_by_nature, Sign sign);
  std::optional<ParsedQuantity> error_of(const Member& member, Dimension dimension,
                                         std::string_view zero, std::string_view example);
  void subgroup(ChartingSection& charting);
  void group_by(ChartingSection& charting);
  GivenContent content(const Member& member, std::string_view example = "3.7 vol");
  GivenTarget target(const Member& member);
  GivenSolute amount_of(const Member& member, std::span<const Dimension> dimensions,
                        std::string_view example);
  [[nodiscard]] std::string full_key(const std::string& key) const;

  const Node& table_;
  std::string name_;
  Recipe& recipe_;
  Findings& findings_;
  std::vector<std::string> known_;
};

/// Reads [gauge] and [card].
void read_readings(Section& top, Recipe& recipe);

}  // namespace capsigh::recipe_detail
