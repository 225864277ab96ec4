#include "capsigh/answer/bind.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "bind_input.hpp"
#include "bind_life.hpp"
#include "bind_package.hpp"
#include "recipe_check.hpp"
#include "records.hpp"

namespace capsigh {
namespace {

using answer_detail::constant;
using answer_detail::NamedParts;
using answer_detail::note;
using answer_detail::uncertain;

constexpr std::string_view kSelection = "selection.henry.";
constexpr std::string_view kMixture = "mixture.";

class Binder : answer_detail::RecipeCheck {
 public:
  using RecipeCheck::RecipeCheck;

  Outcome<Binding> run() {
    check();
    if (has_error(findings_) || !recipe_.readable) return {{}, findings_};
    build_medium();
    if (has_error(findings_)) return {{}, findings_};
    bind_ambient();
    bind_contact();
    bind_targets();
    bind_container();
    life().bind_opening();
    life().bind_conditioning();
    life().bind_supply();
    mark_presence();
    if (has_error(findings_)) return {{}, findings_};
    return {std::move(binding_), {}};
  }

 private:
  template <class Q>
  Uncertain<Q> take(const std::string& key, const Given<Q>& given) {
    return answer_detail::take(binding_, key, given);
  }

  // Bicarbonate does not stay in an acid drink: it ends as CO2.
  void question_bicarbonate() {
    if (liquid_ == nullptr) return;
    bool acid = false;
    bool bicarbonate = false;
    for (const auto& s : liquid_->solutes) {
      acid = acid || s.name.text == "citric_acid";
      bicarbonate = bicarbonate || (s.salt && s.name.text.find("CO3") != std::string::npos);
    }
    if (!acid || !bicarbonate) return;
    binding_.notes.push_back(note(
        Severity::caution, "bicarbonate-in-acid",
        "carbonate and bicarbonate end as CO2 in an acid drink (80 mg/L NaHCO3: 0.04 g/L); it is "
        "not added to the content here"));
  }

  void build_medium() {
    const auto zero = constant<Temperature>(library_, "fundamental.T0");
    auto liquid = answer_detail::liquid_model(library_, liquid_, *named_, zero, sink());
    if (has_error(findings_)) return;
    problem().medium = answer_detail::medium_of(library_, std::move(liquid), gases_, relation_);
    binding_.relation = problem().medium.convention.record;
    for (const auto part : named_->parts) {
      const Record& relation = library_.at(part);
      if (&relation != binding_.relation) binding_.other_relations.push_back(&relation);
    }
    problem().classed_by_gauge = std::find(named_->parts.begin(), named_->parts.end(),
                                           "relation.oiv") != named_->parts.end();
    if (problem().classed_by_gauge) cite(library_.at("class.sparkling_wine"));
    describe_liquid();
    question_bicarbonate();
    for (const auto& gas : gases_) {
      if (const Record* hazard = library_.find("hazard." + gas)) {
        binding_.notes.push_back(
            note(Severity::caution, "hazardous-gas", std::string(hazard->definition)));
      }
      if (const Record* reaction = library_.find("reactive." + gas)) {
        binding_.notes.push_back(
            note(Severity::caution, "reactive-gas", std::string(reaction->definition)));
      }
    }
    problem().air = spread(air_);
    const auto& lines = recipe_.gas;
    for (std::size_t i = 0; i < lines_.size(); ++i) {
      ShareLine line;
      line.name = lines.empty() ? "CO2" : lines[i].name.text;
      line.parts = spread(lines_[i]);
      line.rest = !lines.empty() && lines[i].rest;
      line.share = exactly(Fraction(1.0));
      line.find = !lines.empty() && lines[i].find;
      if (!lines.empty() && !line.rest && !line.find)
        line.share = take("gas." + line.name, lines[i].share);
      problem().contact.gas.push_back(line);
    }
  }

  // What of the liquid was not in the recipe.
  void describe_liquid() {
    std::string defaults;
    const auto& solutes = problem().medium.liquid.solutes;
    for (std::size_t i = 0; i < named_->values.size(); ++i) {
      const std::string_view symbol = named_->symbols[i];
      const std::size_t space = symbol.find(' ');
      const bool taken = std::any_of(solutes.begin(), solutes.end(), [&](const auto& s) {
        return s.assumed && s.name == symbol.substr(0, space);
      });
      if (!taken) continue;
      defaults += fmt::format("{}{} {} {}", defaults.empty() ? "" : ", ", symbol.substr(0, space),
                              named_->values[i].digits, symbol.substr(space + 1));
    }
    if (std::any_of(solutes.begin(), solutes.end(), [](const auto& s) { return s.assumed; })) {
      assume("composition-assumed", fmt::format("composition of {} where the recipe gives none: {}",
                                                binding_.liquid, defaults));
      cite(*named_);
    }
  }

  std::size_t index(std::string_view gas) {
    const auto& gases = problem().medium.gases;
    const auto it =
        std::find_if(gases.begin(), gases.end(), [&](const GasModel& g) { return g.name == gas; });
    return static_cast<std::size_t>(it - gases.begin());
  }

  Shares spread(const NamedParts& parts) {
    Shares shares(problem().medium.size(), Fraction(0.0));
    for (std::size_t i = 0; i < parts.gases.size(); ++i) {
      const std::size_t at = index(parts.gases[i]);
      if (at < shares.size()) shares[at] = shares[at] + Fraction(parts.parts[i]);
    }
    return shares;
  }

  void bind_ambient() {
    auto& ambient = problem().ambient;
    const Record& standard = library_.at("atmosphere.iso2533");
    ambient.atmosphere = StandardAtmosphere::from(standard);
    const auto* contact = recipe_.contact ? &*recipe_.contact : nullptr;
    if (contact != nullptr && contact->ambient) {
      ambient.stated = take("contact.ambient", *contact->ambient);
      question_ambient(ambient.stated.best);
      if (contact->altitude) question_ambient(*contact->altitude);
    } else if (contact != nullptr && contact->altitude) {
      ambient.altitude = take("contact.altitude", *contact->altitude);
      cite(standard);
      const auto p = ambient.atmosphere(ambient.altitude->best);
      assume("ambient-from-altitude",
             fmt::format("ambient {:.1f} hPa from the altitude by the standard atmosphere; the "
                         "weather moves it by some 10 hPa",
                         in_unit(p.value(), *find_unit("hPa", Dimension::pressure))));
    } else {
      const auto p = constant<Pressure>(library_, "assumed.ambient");
      ambient.stated = exactly(p);
      binding_.doubt_not_stated.emplace_back("contact.ambient");
      assume("ambient-assumed",
             fmt::format("ambient {:.2f} hPa (neither ambient nor altitude given); altitude takes "
                         "some 12 hPa per 100 m, the weather moves it by some 10 hPa",
                         in_unit(p.value(), *find_unit("hPa", Dimension::pressure))));
    }
  }

  // Nowhere where people work is it so low or so high.
  void question_ambient(Pressure stated) {
    const Record& range = library_.at("atmosphere.altitude_range");
    const auto at = [&](std::size_t end) {
      return problem().ambient.atmosphere(from_si<Length>(range.values[end].value)).value();
    };
    const double weather = constant<Pressure>(library_, "assumed.weather_spread").value();
    if (stated.value() >= at(1) - weather && stated.value() <= at(0) + weather) return;
    const auto& hectopascal = *find_unit("hPa", Dimension::pressure);
    binding_.notes.push_back(
        note(Severity::caution, "ambient-unlikely",
             fmt::format("ambient {} hPa is found nowhere between {} and {} m; is it in the right "
                         "unit? The stated value counts",
                         significant(in_unit(stated.value(), hectopascal), 4),
                         range.values[0].digits, range.values[1].digits),
             recipe_.contact->ambient->source.place));
  }

  void question_ambient(const Given<Length>& altitude) {
    const auto standard = problem().ambient.atmosphere(*altitude.value);
    const auto stated = problem().ambient.stated.best;
    const auto spread = constant<Pressure>(library_, "assumed.weather_spread");
    if (std::abs((stated - standard).value()) <= spread.value()) return;
    const auto& hectopascal = *find_unit("hPa", Dimension::pressure);
    binding_.notes.push_back(
        note(Severity::caution, "ambient-against-altitude",
             fmt::format(
                 "ambient {:.0f} hPa does not fit the altitude, where {:.0f} hPa is usual: "
                 "weather services report pressure reduced to sea level; the stated value counts",
                 in_unit(stated.value(), hectopascal), in_unit(standard.value(), hectopascal)),
             recipe_.contact->ambient->source.place));
  }

  void bind_contact() {
    const auto& given = *recipe_.contact;
    auto& contact = problem().contact;
    if (given.temperature) contact.temperature = take("contact.temperature", *given.temperature);
    if (given.pressure) bind_pressure(*given.pressure);
    if (given.depth) contact.depth = take("contact.depth", *given.depth);
    if (given.approach) contact.approach = take("contact.approach", *given.approach);
    problem().gravity = from_si<Acceleration>(library_.at("atmosphere.iso2533").values[3].value);
    problem().target_at_package = recipe_.target_at && recipe_.target_at->text == "package";
    if (given.dissolved_place) {
      contact.content = bind_content(given.dissolved.front(),
                                     "contact.dissolved." + given.dissolved.front().gas.text);
    } else if (recipe_.conditioning) {
      contact.content = ContentCase{};
      contact.content->gas = index("CO2");
      contact.content->conditioned = true;
      problem().content_from_target = recipe_.conditioning->find.has_value();
    } else if (!(given.temperature && given.pressure)) {
      contact.content = bind_content(leading_target(), "");
      problem().content_from_target = true;
    }
    contact.known = !contact.content    ? Known::temperature_pressure
                    : given.temperature ? Known::temperature_content
                                        : Known::pressure_content;
  }

  // One of temperature and pressure is missing: one target decides it, CO2 before others.
  const GivenContent& leading_target() {
    const auto& targets = recipe_.target;
    const auto leads = [](const GivenTarget& t) { return !t.is_maximum && !t.is_minimum; };
    const auto first = std::find_if(targets.begin(), targets.end(), leads);
    const auto co2 = std::find_if(targets.begin(), targets.end(), [&](const GivenTarget& t) {
      return leads(t) && t.content.gas.text == "CO2";
    });
    const auto& leading = (co2 != targets.end() ? *co2 : *first).content;
    if (std::count_if(targets.begin(), targets.end(), leads) > 1) {
      assume("target-leads",
             fmt::format("of several targets, {} decides what is missing", leading.gas.text));
    }
    return leading;
  }

  void bind_pressure(const GivenPressure& given) {
    auto& contact = problem().contact;
    if (const auto* reading = std::get_if<GaugePressure>(&given.value)) {
      contact.gauge_pressure =
          take<GaugePressure>("contact.pressure", {*reading, given.plus_minus, given.source});
    } else {
      contact.absolute_pressure = take<Pressure>(
          "contact.pressure", {std::get<Pressure>(given.value), given.plus_minus, given.source});
    }
  }

  // A tolerance is not a doubt: the content of a target (no key) is exact.
  ContentCase bind_content(const GivenContent& given, const std::string& key) {
    ContentCase content;
    content.gas = index(given.gas.text);
    content.measure = given.measure;
    content.amount = key.empty() ? exactly(*given.amount.value) : take(key, given.amount);
    return content;
  }

  void bind_targets() {
    for (const auto& target : recipe_.target) {
      if (problem().targets.size() < kMaxGases) {
        problem().targets.push_back(bind_content(target.content, ""));
        auto& bound = problem().targets.back();
        bound.is_limit = target.is_maximum || target.is_minimum;
        const double value = bound.amount.best.value();
        const auto& tolerance = target.content.amount.plus_minus;
        if (target.is_maximum) bound.accepted.high = value;
        if (target.is_minimum) bound.accepted.low = value;
        if (tolerance) bound.accepted = {value - tolerance->value(), value + tolerance->value()};
      }
    }
  }

  void bind_container() {
    if (!recipe_.container) return;
    const auto& given = *recipe_.container;
    ContainerCase container;
    container.brimful = take("container.brimful", *given.brimful);
    if (given.fill) container.fill = take("container.fill", *given.fill);
    if (given.fill_mass) container.fill_mass = take("container.fill_mass", *given.fill_mass);
    if (given.closing_temperature) {
      container.closing_temperature =
          take("container.closed_at.temperature", *given.closing_temperature);
    }
    bind_closing_pressure(given, container);
    bind_closing_gas(given, container);
    if (given.rated) {
      if (const auto* reading = std::get_if<GaugePressure>(&given.rated->value)) {
        container.rated_gauge = *reading;
      } else {
        container.rated_absolute = std::get<Pressure>(given.rated->value);
      }
    }
    std::string closed;
    if (!given.closing_temperature) closed = "at the contact's temperature";
    if (!given.closing_pressure) {
      closed += std::string(closed.empty() ? "" : " and ") + "at 0 bar gauge";
    }
    const bool rigid = !given.kind && !given.stretch;
    if (!closed.empty() || rigid) {
      assume("closing-assumed", "closed " + closed + (rigid && !closed.empty() ? ", " : "") +
                                    (rigid ? "in a rigid container" : ""));
    }
    for (const auto& limit : given.limit) container.limits.push_back(bind_content(limit, ""));
    answer_detail::bind_package(given, library_, binding_, container);
    problem().container = container;
  }

  void bind_closing_pressure(const ContainerSection& given, ContainerCase& container) {
    container.closing_gauge = exactly(
        from_si<GaugePressure>(constant<Pressure>(library_, "assumed.closing_pressure").value()));
    if (!given.closing_pressure) return;
    const auto& pressure = *given.closing_pressure;
    const std::string key = "container.closed_at.pressure";
    if (const auto* reading = std::get_if<GaugePressure>(&pressure.value)) {
      container.closing_gauge =
          take<GaugePressure>(key, {*reading, pressure.plus_minus, pressure.source});
    } else {
      container.closing_absolute = take<Pressure>(
          key, {std::get<Pressure>(pressure.value), pressure.plus_minus, pressure.source});
    }
  }

  void bind_closing_gas(const ContainerSection& given, ContainerCase& container) {
    container.closing_air = exactly(constant<Fraction>(library_, "assumed.closing_air"));
    if (given.closing_air) {
      container.closing_air = take("container.closed_at.air", *given.closing_air);
    } else if (given.closing_air_volume) {
      container.closing_air_volume = take("container.closed_at.air", *given.closing_air_volume);
    } else {
      assume("closing-air-assumed", "headspace at closing: no air, the gas of the recipe");
    }
    if (given.closing_oxygen) {
      container.closing_oxygen =
          bind_content(*given.closing_oxygen, "container.closed_at.dissolved_oxygen");
    }
    for (const auto& loss : given.filling_loss) {
      container.filling_loss.push_back(
          bind_content(loss, "container.filling_loss." + loss.gas.text));
    }
    if (given.nitrogen_dose) {
      container.nitrogen_dose = take("container.nitrogen_dose", *given.nitrogen_dose);
    }
  }

  // What opening, conditioning and supply add is bound in a file of its own.
  answer_detail::LifeBinder life() {
    return {recipe_, library_, binding_, [this](std::string_view gas) { return index(gas); },
            [this](const GivenContent& given, const std::string& key) {
              return bind_content(given, key);
            }};
  }

  // Oxygen that is measured at closing, limited, or comes in through the wall.
  bool follows_oxygen(const ContainerCase& container) {
    const auto oxygen = index("O2");
    const auto is = [&](const auto& of) { return of.gas == oxygen; };
    const auto& limits = container.limits;
    return container.closing_oxygen || std::any_of(limits.begin(), limits.end(), is) ||
           (container.shelf &&
            std::any_of(container.shelf->wall.begin(), container.shelf->wall.end(), is));
  }

  void mark_presence() {
    auto& c = problem();
    // Any share will do to see which gases are there when one is to be found.
    const bool find = std::any_of(c.contact.gas.begin(), c.contact.gas.end(),
                                  [](const ShareLine& line) { return line.find; });
    const Shares shares = contact_shares(c, Fraction(find ? 1e-3 : 0.0));
    const bool air = c.container &&
                     (c.container->closing_air.best.value() > 0 || c.container->closing_air_volume);
    for (std::size_t i = 0; i < c.medium.size(); ++i) {
      c.in_contact.push_back(shares[i].value() > 0 ? 1 : 0);
      const bool enters = (air && c.air[i].value() > 0) ||
                          (c.container && follows_oxygen(*c.container) && i == index("O2")) ||
                          (c.container && c.container->nitrogen_dose && i == index("N2"));
      c.in_container.push_back(c.in_contact.back() != 0 || enters ? 1 : 0);
    }
  }
};  // namespace

}  // namespace

std::vector<std::string> gas_names(const Library& library) {
  std::vector<std::string> names;
  for (const auto& record : library.records()) {
    for (const auto prefix : {kSelection, kMixture}) {
      if (record.key.starts_with(prefix)) names.emplace_back(record.key.substr(prefix.size()));
    }
  }
  return names;
}

Outcome<Binding> bind(const Recipe& recipe, const Library& library) {
  return Binder(recipe, library).run();
}

}  // namespace capsigh
