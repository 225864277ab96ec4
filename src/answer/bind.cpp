#include "capsigh/answer/bind.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "liquids.hpp"
#include "records.hpp"

namespace capsigh {
namespace {

using answer_detail::constant;

constexpr std::string_view kSelection = "selection.henry.";
constexpr std::string_view kMixture = "mixture.";

Finding note(Severity severity, std::string code, std::string message,
             std::optional<Place> place = std::nullopt) {
  Finding f;
  f.severity = severity;
  f.code = std::move(code);
  f.message = std::move(message);
  f.place = std::move(place);
  return f;
}

template <class Q>
Uncertain<Q> uncertain(const Given<Q>& given) {
  if (!given.plus_minus) return exactly(*given.value);
  // A limit of error is rectangular: u = a/√3 (JCGM 100, 4.3.7).
  return {*given.value, *given.plus_minus * (1.0 / std::sqrt(3.0)), Shape::rectangular, 0};
}

// A line of [gas] as gases of the library and their parts of it.
struct NamedParts {
  std::vector<std::string> gases;
  std::vector<double> parts;
};

class Binder {
 public:
  Binder(const Recipe& recipe, const Library& library) : recipe_(recipe), library_(library) {}

  Outcome<Binding> run() {
    check_liquid();
    read_gases();
    check_contact();
    check_contents();
    check_altitude();
    if (recipe_.container) check_container(*recipe_.container);
    if (has_error(findings_) || !recipe_.readable) return {{}, findings_};
    build_medium();
    if (has_error(findings_)) return {{}, findings_};
    bind_ambient();
    bind_contact();
    bind_targets();
    if (has_error(findings_)) return {{}, findings_};
    bind_container();
    bind_opening();
    mark_presence();
    if (has_error(findings_)) return {{}, findings_};
    return {std::move(binding_), {}};
  }

 private:
  Case& problem() { return binding_.problem; }

  void error(std::string code, std::string message, std::string expected, std::string example,
             const std::optional<Place>& place, std::optional<Place> conflict = std::nullopt) {
    Finding f = note(Severity::error, std::move(code), std::move(message), place);
    f.expected = std::move(expected);
    f.example = std::move(example);
    f.conflicts_with = std::move(conflict);
    if (!f.place) f.place = Place{recipe_.file, 0, 0, 1, ""};
    findings_.push_back(std::move(f));
  }

  void assume(std::string code, std::string message) {
    binding_.notes.push_back(note(Severity::assumption, std::move(code), std::move(message)));
  }

  template <class Q>
  Uncertain<Q> take(const std::string& key, const Given<Q>& given) {
    if (!given.plus_minus) binding_.doubt_not_stated.push_back(key);
    return uncertain(given);
  }

  // ---- liquid and gases -------------------------------------------------------------------------

  // The named liquid, its relation and what is wrong with either.
  void check_liquid() {
    liquid_ = recipe_.liquid ? &*recipe_.liquid : nullptr;
    const LocatedText* like = liquid_ != nullptr && liquid_->like ? &*liquid_->like : nullptr;
    binding_.liquid = like != nullptr ? like->text : "water";
    named_ = answer_detail::named_liquid(library_, binding_.liquid);
    if (named_ == nullptr) {
      const auto names = answer_detail::liquid_names(library_);
      const auto near = nearest_name(binding_.liquid, names);
      error(
          "unknown-liquid",
          near ? fmt::format("no liquid is called '{}'; did you mean '{}'?", binding_.liquid, *near)
               : fmt::format("no liquid is called '{}'", binding_.liquid),
          fmt::format("{}", fmt::join(names, ", ")), "like = \"water\"", like->place);
      named_ = answer_detail::named_liquid(library_, "water");
    }
    if (like == nullptr) {
      assume("liquid-assumed", recipe_.liquid && !recipe_.liquid->solutes.empty()
                                   ? "liquid: water with what the recipe lists"
                                   : "liquid: water");
    }
    relation_ = answer_detail::relation_in_force(library_, liquid_, *named_, sink());
    if (liquid_ != nullptr && liquid_->volume_basis) check_volume_basis(*liquid_->volume_basis);
    check_sugars();
  }

  void check_volume_basis(const LocatedText& basis) {
    problem().ideal_volumes = basis.text == "ideal";
    if (basis.text == "ideal" || basis.text == "real") return;
    error("unknown-volume-basis", fmt::format("no volume basis is called '{}'", basis.text),
          "\"real\" (1 vol of CO2 is 1.977 g/L) or \"ideal\" (1.963 g/L)",
          "volume_basis = \"real\"", basis.place);
  }

  // Brix counts all that is dissolved; a sugar beside it would count twice.
  void check_sugars() {
    if (liquid_ == nullptr) return;
    const auto of = [&](auto&& wanted) {
      const auto it = std::find_if(liquid_->solutes.begin(), liquid_->solutes.end(),
                                   [&](const GivenSolute& s) { return wanted(s.name.text); });
      return it == liquid_->solutes.end() ? nullptr : &*it;
    };
    const auto* brix = of([](const std::string& key) { return key == "brix"; });
    const auto* sugar = of([](const std::string& key) {
      return key == "sucrose" || key == "glucose" || key == "fructose" || key == "extract";
    });
    if (brix == nullptr || sugar == nullptr) return;
    error("brix-and-sugar", "brix counts the sugars already", "brix, or the sugars one by one", "",
          sugar->name.place, brix->name.place);
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

  answer_detail::LiquidSink sink() {
    return {[this](Finding f) {
              f.severity = Severity::error;
              if (!f.place || f.place->file.empty()) f.place = Place{recipe_.file, 0, 0, 1, ""};
              findings_.push_back(std::move(f));
            },
            [this](const std::string& key) { binding_.doubt_not_stated.push_back(key); }};
  }

  // The gases behind a name; empty (and a finding) if there is no such gas.
  NamedParts parts_of(const LocatedText& name) {
    if (library_.find(std::string(kSelection) + name.text) != nullptr) return {{name.text}, {1.0}};
    if (const Record* mixture = library_.find(std::string(kMixture) + name.text)) {
      cite(*mixture);
      return mixture_parts(*mixture);
    }
    const auto names = gas_names(library_);
    const auto near = nearest_name(name.text, names);
    error("unknown-gas",
          near ? fmt::format("no gas is called '{}'; did you mean '{}'?", name.text, *near)
               : fmt::format("no gas is called '{}'", name.text),
          fmt::format("{}", fmt::join(names, ", ")), "CO2 = \"99.9 %\"", name.place);
    return {};
  }

  static NamedParts mixture_parts(const Record& mixture) {
    NamedParts parts;
    for (std::size_t i = 0; i < mixture.values.size(); ++i) {
      parts.gases.emplace_back(mixture.symbols[i]);
      parts.parts.push_back(mixture.values[i].value * mixture.factor);
    }
    return parts;
  }

  void cite(const Record& definition) {
    auto& used = binding_.also_used;
    if (std::find(used.begin(), used.end(), &definition) == used.end()) {
      used.push_back(&definition);
    }
  }

  void need_gas(const std::string& name) {
    if (std::find(gases_.begin(), gases_.end(), name) == gases_.end()) gases_.push_back(name);
  }

  void read_gases() {
    if (recipe_.gas.empty()) {
      if (recipe_.gas_place) {
        error("gas-empty", "[gas] names no gas", "the gases of the headspace", "CO2 = \"100 %\"",
              recipe_.gas_place);
      } else {
        assume("gas-assumed", "headspace gas: pure CO2");
      }
      lines_.push_back({{"CO2"}, {1.0}});
      need_gas("CO2");
    }
    for (const auto& line : recipe_.gas) {
      lines_.push_back(parts_of(line.name));
      for (const auto& gas : lines_.back().gases) need_gas(gas);
    }
    check_shares();
    need_air();
  }

  // Air is over every open package, and in the headspace of one closed with some.
  void need_air() {
    const Record& mixture = library_.at("mixture.air");
    air_ = mixture_parts(mixture);
    if (!recipe_.opening && !(recipe_.container && recipe_.container->closing_air)) return;
    cite(mixture);
    for (const auto& gas : air_.gases) need_gas(gas);
  }

  void check_shares() {
    double sum = 0;
    const GivenShare* rest = nullptr;
    for (const auto& line : recipe_.gas) {
      if (line.rest && rest != nullptr) {
        error("rest-twice", "two gases cannot both take the rest", "\"rest\" for one gas only", "",
              line.name.place, rest->name.place);
      }
      if (line.rest) rest = &line;
      if (!line.rest && !line.share.value) return;  // unreadable: reported where it was read
      if (!line.rest) sum += line.share.value->value();
    }
    constexpr double tolerance = 1e-4;  // 0.01 of the 100 %
    const bool fits = rest != nullptr ? sum <= 1.0 + tolerance : std::abs(sum - 1.0) <= tolerance;
    if (recipe_.gas.empty() || fits) return;
    error("shares-do-not-add-up", fmt::format("the shares of [gas] add up to {:.4g} %", sum * 100),
          rest != nullptr ? "at most 100 % beside the rest" : "100 % ± 0.01, or one gas \"rest\"",
          "air = \"rest\"", recipe_.gas.back().share.source.place);
  }

  // ---- contact ----------------------------------------------------------------------------------

  void check_contact() {
    const auto& contact = recipe_.contact;
    const bool temperature = contact && contact->temperature;
    const bool pressure = contact && contact->pressure;
    const bool dissolved = contact && contact->dissolved_place;
    if (temperature && pressure && dissolved) {
      error("over-determined",
            "temperature, pressure and dissolved are all given; any two give the third",
            "two of them, and the wish as a [target]", "[target]\nCO2 = \"3.7 vol\"",
            contact->dissolved_place, contact->pressure->source.place);
      return;
    }
    // What could not be read, or was called by a wrong name, is already said; what seems to be
    // missing because of it would only be noise.
    if (!recipe_.readable) return;
    if (dissolved && contact->dissolved.size() != 1) {
      error("dissolved-one-gas",
            fmt::format("'contact.dissolved' names {} gases", contact->dissolved.size()),
            "the content of one gas; the others follow from [gas]",
            "dissolved = { CO2 = \"3.7 vol\" }", contact->dissolved_place);
    }
    const int known = int{temperature} + int{pressure} + int{dissolved};
    if (known == 2 || (known == 1 && !dissolved && !recipe_.target.empty())) return;
    std::vector<std::string> missing;
    if (!temperature) missing.emplace_back("contact.temperature");
    if (!pressure) missing.emplace_back("contact.pressure");
    if (!dissolved) missing.emplace_back("contact.dissolved or a [target]");
    error("nothing-answerable",
          fmt::format("nothing can be answered yet: of temperature, pressure and content, two must "
                      "be known; missing are {}",
                      fmt::join(missing, ", ")),
          "two of the three under [contact], or one of them and a [target]",
          "[contact]\ntemperature = \"4 degC\"\npressure = \"2.3 bar gauge\"",
          contact ? std::optional<Place>(contact->place) : std::nullopt);
  }

  // Contents can only be asked of gases that the headspace holds.
  void check_content_gas(const GivenContent& given) {
    const bool held = std::any_of(lines_.begin(), lines_.end(), [&](const NamedParts& line) {
      return std::find(line.gases.begin(), line.gases.end(), given.gas.text) != line.gases.end();
    });
    if (held) return;
    const auto names = gas_names(library_);
    const auto near = nearest_name(given.gas.text, names);
    const bool exists = std::find(names.begin(), names.end(), given.gas.text) != names.end();
    error("gas-not-in-headspace",
          fmt::format("a content of '{}' is asked for, but the headspace does not hold it{}",
                      given.gas.text,
                      exists || !near ? "" : fmt::format("; did you mean '{}'?", *near)),
          "a gas named under [gas] (without [gas], CO2)", "", given.gas.place, recipe_.gas_place);
  }

  void check_contents() {
    for (const auto& target : recipe_.target) check_content_gas(target);
    if (!recipe_.contact) return;
    for (const auto& content : recipe_.contact->dissolved) check_content_gas(content);
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
    describe_liquid();
    question_bicarbonate();
    for (const auto& gas : gases_) {
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
      if (!lines.empty() && !line.rest) line.share = take("gas." + line.name, lines[i].share);
      problem().contact.gas.push_back(line);
    }
  }

  // What of the liquid was not in the recipe.
  void describe_liquid() {
    std::string defaults;
    for (std::size_t i = 0; i < named_->values.size(); ++i) {
      const std::string_view symbol = named_->symbols[i];
      const std::size_t space = symbol.find(' ');
      defaults += fmt::format("{}{} {} {}", defaults.empty() ? "" : ", ", symbol.substr(0, space),
                              named_->values[i].digits, symbol.substr(space + 1));
    }
    const auto& solutes = problem().medium.liquid.solutes;
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
      assume("ambient-assumed",
             fmt::format("ambient {:.2f} hPa (neither ambient nor altitude given)",
                         in_unit(p.value(), *find_unit("hPa", Dimension::pressure))));
    }
  }

  // The standard troposphere ends there, and nobody carbonates beyond.
  void check_altitude() {
    if (!recipe_.contact || !recipe_.contact->altitude || !recipe_.contact->altitude->value) return;
    const Record& range = library_.at("atmosphere.altitude_range");
    const double metres = recipe_.contact->altitude->value->value();
    if (metres >= range.values[0].value && metres <= range.values[1].value) return;
    error("impossible-value", "'contact.altitude' is beyond the standard troposphere",
          fmt::format("{} to {} m", range.values[0].digits, range.values[1].digits),
          "altitude = \"350 m\"", recipe_.contact->altitude->source.place);
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
    if (given.dissolved_place) {
      contact.content = bind_content(given.dissolved.front(), false);
    } else if (!(given.temperature && given.pressure)) {
      contact.content = bind_content(leading_target(), true);
      problem().content_from_target = true;
    }
    contact.known = !contact.content    ? Known::temperature_pressure
                    : given.temperature ? Known::temperature_content
                                        : Known::pressure_content;
  }

  // One of temperature and pressure is missing: one target decides it, CO2 before others.
  const GivenContent& leading_target() {
    const auto& targets = recipe_.target;
    const auto co2 = std::find_if(targets.begin(), targets.end(),
                                  [](const GivenContent& t) { return t.gas.text == "CO2"; });
    const auto& leading = co2 != targets.end() ? *co2 : targets.front();
    if (targets.size() > 1) {
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

  // A tolerance is not a doubt: the content of a target is exact.
  ContentCase bind_content(const GivenContent& given, bool is_target) {
    ContentCase content;
    content.gas = index(given.gas.text);
    content.measure = given.measure;
    content.amount = is_target ? exactly(*given.amount.value)
                               : take("contact.dissolved." + given.gas.text, given.amount);
    return content;
  }

  void bind_targets() {
    for (const auto& target : recipe_.target) {
      if (problem().targets.size() < kMaxGases) {
        problem().targets.push_back(bind_content(target, true));
      }
    }
  }

  // ---- container and opening
  // ----------------------------------------------------------------------

  void check_container(const ContainerSection& container) {
    if (!container.brimful || !container.fill) {
      error("container-incomplete",
            fmt::format("[container] lacks '{}'", container.brimful ? "fill" : "brimful"),
            "brimful (the container filled to its brim) and fill",
            "brimful = \"355 mL\"\nfill = \"330 mL\"", container.place);
      return;
    }
    const auto& brimful = *container.brimful;
    const auto& fill = *container.fill;
    if (brimful.value && fill.value && *fill.value >= *brimful.value) {
      error("container-overfilled", "the fill leaves no headspace in the container",
            "a fill below brimful", "", fill.source.place, brimful.source.place);
    }
  }

  void bind_container() {
    if (!recipe_.container) return;
    const auto& given = *recipe_.container;
    ContainerCase container;
    container.brimful = take("container.brimful", *given.brimful);
    container.fill = take("container.fill", *given.fill);
    container.closing_pressure =
        from_si<GaugePressure>(constant<Pressure>(library_, "assumed.closing_pressure").value());
    if (given.closing_air) {
      container.closing_air = take("container.closed_at.air", *given.closing_air);
    } else {
      container.closing_air = exactly(constant<Fraction>(library_, "assumed.closing_air"));
      assume("closing-air-assumed", "headspace at closing: no air, the gas of the recipe");
    }
    assume("closing-assumed",
           "closed at the contact's temperature and 0 bar gauge, in a rigid container");
    problem().container = container;
  }

  void bind_opening() {
    if (!recipe_.opening) return;
    OpeningCase opening;
    if (recipe_.opening->temperature) {
      opening.temperature = take("opening.temperature", *recipe_.opening->temperature);
    } else {
      assume("opening-temperature-assumed", "opened at the temperature of the liquid above");
    }
    if (!recipe_.container) {
      assume("opening-per-litre",
             "no container: losses per litre of degassed liquid, no headspace");
    }
    problem().opening = opening;
  }

  void mark_presence() {
    auto& c = problem();
    const Shares shares = contact_shares(c);
    const bool air = c.container && c.container->closing_air.best.value() > 0;
    for (std::size_t i = 0; i < c.medium.size(); ++i) {
      c.in_contact.push_back(shares[i].value() > 0 ? 1 : 0);
      const bool with_air = air && c.air[i].value() > 0;
      c.in_container.push_back(c.in_contact.back() != 0 || with_air ? 1 : 0);
    }
  }

  const Recipe& recipe_;
  const Library& library_;
  const LiquidSection* liquid_ = nullptr;
  const Record* named_ = nullptr;
  const Record* relation_ = nullptr;
  Binding binding_;
  Findings findings_;
  std::vector<std::string> gases_;
  std::vector<NamedParts> lines_;
  NamedParts air_;
};

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
