// A recipe bound for readings: its contact gives way to what gauge and thermometer show.
#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "capsigh/answer/reading.hpp"
#include "judging.hpp"
#include "recipe_check.hpp"
#include "records.hpp"

namespace capsigh {
namespace {

using answer_detail::constant;
using answer_detail::note;

template <class Q>
Uncertain<Q> uncertain(const Given<Q>& given) {
  if (!given.plus_minus) return exactly(*given.value);
  // A limit of error is rectangular: u = a/√3 (JCGM 100, 4.3.7).
  return {*given.value, *given.plus_minus * (1.0 / std::sqrt(3.0)), Shape::rectangular, 0};
}

bool has_air(const Recipe& recipe) {
  return recipe.container &&
         (recipe.container->closing_air || recipe.container->closing_air_volume);
}

// The recipe with a stand-in contact: a temperature and a pressure that every reading replaces.
Recipe with_stand_in(Recipe recipe, const Library& library, bool with_air) {
  if (!recipe.contact) recipe.contact = ContactSection{};
  auto& contact = *recipe.contact;
  if (recipe.container) {
    if (!recipe.container->closing_temperature) {
      recipe.container->closing_temperature = contact.temperature;
    }
    if (with_air && !has_air(recipe)) {
      recipe.container->closing_air = Given<Fraction>{Fraction(0.0), Fraction(0.0), {}};
    }
  }
  Given<Temperature> temperature;
  temperature.value = constant<Temperature>(library, "fundamental.T_content");
  GivenPressure pressure;
  pressure.value = GaugePressure(constant<Pressure>(library, "assumed.ambient"));
  contact.temperature = temperature;
  contact.pressure = pressure;
  contact.dissolved.clear();
  contact.dissolved_place.reset();
  contact.depth.reset();
  contact.approach.reset();
  recipe.opening.reset();
  recipe.conditioning.reset();
  recipe.supply.reset();
  if (recipe.target_at && recipe.target_at->text == "package") recipe.target_at.reset();
  return recipe;
}

Dimension dimension_of(ContentMeasure measure) {
  switch (measure) {
    case ContentMeasure::volumes: return Dimension::gas_volumes;
    case ContentMeasure::mass_concentration: return Dimension::mass_concentration;
    case ContentMeasure::amount_concentration: return Dimension::amount_concentration;
    case ContentMeasure::molality: return Dimension::molality;
    case ContentMeasure::mass_fraction: return Dimension::mass_fraction;
  }
  return Dimension::gas_volumes;
}

// Of several targets: CO2 with a tolerance, else the first that judges, else the first.
std::size_t leading_target(const Case& c) {
  const auto& targets = c.targets;
  const auto judges = [](const ContentCase& t) { return t.accepted.bounded(); };
  for (std::size_t i = 0; i < targets.size(); ++i) {
    if (targets[i].gas == c.medium.co2 && judges(targets[i])) return i;
  }
  const auto it = std::find_if(targets.begin(), targets.end(), judges);
  return it == targets.end() ? 0 : static_cast<std::size_t>(it - targets.begin());
}

void choose_target(const Recipe& recipe, ReadingBinding& out) {
  const Case& c = out.binding.problem;
  out.unit = find_unit("vol", Dimension::gas_volumes);
  if (c.targets.empty()) {
    const bool co2 = c.medium.co2 < c.medium.size() && c.in_contact[c.medium.co2] != 0;
    const auto first = std::find(c.in_contact.begin(), c.in_contact.end(), 1);
    out.gas = co2 ? c.medium.co2 : static_cast<std::size_t>(first - c.in_contact.begin());
    return;
  }
  const std::size_t at = leading_target(c);
  const auto& target = c.targets[at];
  const auto& given = recipe.target[at];
  out.gas = target.gas;
  out.measure = target.measure;
  out.accepted = target.accepted;
  if (!target.is_limit) out.target = target.amount.best.value();
  const auto& text = given.content.amount.source.text;
  out.wish = (given.is_maximum ? "max " : given.is_minimum ? "min " : "") + text;
  if (const Unit* unit = written_unit(text, dimension_of(target.measure))) {
    out.unit = unit;
  }
}

template <class Q>
Uncertain<Q> instrument(const std::string& key, const std::optional<Given<Q>>& given,
                        Binding& binding) {
  if (!given || !given->plus_minus) {
    binding.doubt_not_stated.push_back(key);
    return exactly(Q{});
  }
  return uncertain(*given);
}

// What the dead volume holds; nothing where it is evacuated.
Shares dead_gas(const GaugeSection& gauge, const Case& c) {
  Shares shares(c.medium.size(), Fraction(0.0));
  if (!gauge.piercer_gas || gauge.piercer_gas->text == "air") return c.air;
  for (std::size_t i = 0; i < c.medium.size(); ++i) {
    if (c.medium.gases[i].name == gauge.piercer_gas->text) shares[i] = Fraction(1.0);
  }
  return shares;
}

void bind_gauge(const Recipe& recipe, Binding& binding) {
  const GaugeSection none;
  const GaugeSection& given = recipe.gauge ? *recipe.gauge : none;
  GaugeCase gauge;
  gauge.pressure = instrument("gauge.pressure", given.pressure, binding);
  gauge.temperature = instrument("gauge.temperature", given.temperature, binding);
  if (given.pressure_offset) gauge.pressure_offset = uncertain(*given.pressure_offset);
  if (given.temperature_offset) gauge.temperature_offset = uncertain(*given.temperature_offset);
  if (given.piercer_volume) {
    gauge.dead = uncertain(*given.piercer_volume);
    gauge.dead_gas = dead_gas(given, binding.problem);
    if (!given.piercer_gas) {
      binding.notes.push_back(note(Severity::assumption, "piercer-air-assumed",
                                   "the piercer's dead volume holds air at ambient pressure"));
    }
  }
  binding.problem.gauge = gauge;
}

// The stand-in is nobody's assumption, and what concerns closing and opening is not asked.
void forget_stand_in(Binding& binding) {
  std::erase_if(binding.doubt_not_stated, [](const std::string& key) {
    return key == "contact.temperature" || key == "contact.pressure" ||
           key.starts_with("container.closed_at.air");
  });
  std::erase_if(binding.notes, [](const Finding& f) {
    return f.code.starts_with("closing-") || f.code.starts_with("opening-") ||
           f.code == "target-leads";
  });
}

}  // namespace

Outcome<ReadingBinding> bind_readings(const Recipe& recipe, const Library& library, bool with_air) {
  for (const auto& line : recipe.gas) {
    if (!line.find) continue;
    auto f = note(
        Severity::error, "readings-find",
        fmt::format("the share of {} is to be found; readings need a known gas", line.name.text),
        line.share.source.place);
    f.expected = "its share, such as \"30 %\"";
    return {{}, {f}};
  }
  const bool air = with_air || (recipe.gauge && recipe.gauge->piercer_volume);
  auto bound = bind(with_stand_in(recipe, library, air), library);
  if (!bound) return {{}, bound.findings};
  ReadingBinding out;
  out.binding = std::move(*bound.value);
  forget_stand_in(out.binding);
  bind_gauge(recipe, out.binding);
  choose_target(recipe, out);
  out.rule = answer_detail::rule_of(recipe, library);
  return {std::move(out), bound.findings};
}

}  // namespace capsigh
