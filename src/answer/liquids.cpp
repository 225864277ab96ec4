#include "liquids.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>

#include "records.hpp"
#include "salts.hpp"

namespace capsigh::answer_detail {
namespace {

constexpr std::string_view kLiquid = "liquid.";
constexpr std::string_view kRelation = "relation.";

Finding error(std::string code, std::string message, std::string expected, std::string example,
              const Place& place) {
  Finding f;
  f.code = std::move(code);
  f.message = std::move(message);
  f.expected = std::move(expected);
  f.example = std::move(example);
  f.place = place;
  return f;
}

SoluteMeasure measure_of(GivenSoluteMeasure measure) {
  switch (measure) {
    case GivenSoluteMeasure::volume_fraction: return SoluteMeasure::volume_fraction;
    case GivenSoluteMeasure::mass_concentration: return SoluteMeasure::mass_concentration;
    case GivenSoluteMeasure::amount_concentration: return SoluteMeasure::amount_concentration;
    case GivenSoluteMeasure::mass_fraction: break;
  }
  return SoluteMeasure::mass_fraction;
}

SoluteKind kind_of(const std::string& key) {
  if (key == "ethanol") return SoluteKind::ethanol;
  if (key == "citric_acid" || key == "glycerol") return SoluteKind::other;
  return SoluteKind::sugar;
}

// Brix counts what is dissolved as sucrose.
std::string substance(const std::string& key) { return key == "brix" ? "sucrose" : key; }

// A solute of a named liquid: "ethanol % v/v" and its digits.
struct DefaultSolute {
  std::string name;
  SoluteMeasure measure = SoluteMeasure::mass_fraction;
  double amount = 0;
};

DefaultSolute default_solute(std::string_view symbol, const Printed& printed) {
  const std::size_t space = symbol.find(' ');
  const std::string_view unit = symbol.substr(space + 1);
  DefaultSolute solute;
  solute.name = std::string(symbol.substr(0, space));
  constexpr std::array measures{
      std::pair{Dimension::volume_fraction, SoluteMeasure::volume_fraction},
      std::pair{Dimension::mass_concentration, SoluteMeasure::mass_concentration},
      std::pair{Dimension::amount_concentration, SoluteMeasure::amount_concentration},
      std::pair{Dimension::mass_fraction, SoluteMeasure::mass_fraction}};
  for (const auto& [dimension, measure] : measures) {
    if (const Unit* known = find_unit(unit, dimension)) {
      solute.measure = measure;
      solute.amount = printed.value * known->factor;
      return solute;
    }
  }
  throw std::logic_error("a named liquid has the unit " + std::string(unit));
}

class LiquidBinder {
 public:
  LiquidBinder(const Library& library, const LiquidSink& sink, Temperature zero_celsius)
      : library_(library), sink_(sink), zero_celsius_(zero_celsius) {}

  LiquidModel bind(const LiquidSection* given, const Record& named) {
    const Record& vapour = library_.at("vapour.water");
    model_.water_vapour = {WaterVapourPressure::from(vapour), doubt_of(vapour)};
    const Record& density = library_.at("density.water");
    model_.water_density = {WaterDensity::from(density, zero_celsius_), doubt_of(density)};
    model_.water_molar_mass = cited_constant<MolarMass>(library_.at("molar_mass.H2O"));
    add_defaults(given, named);
    if (given != nullptr) {
      for (const auto& solute : given->solutes) add_given(solute);
      add_density(*given);
    }
    return std::move(model_);
  }

 private:
  // Defaults of the named liquid, where the recipe gives nothing of the same kind.
  void add_defaults(const LiquidSection* given, const Record& named) {
    for (std::size_t i = 0; i < named.values.size(); ++i) {
      const auto solute = default_solute(named.symbols[i], named.values[i]);
      const bool overridden =
          given != nullptr &&
          std::any_of(given->solutes.begin(), given->solutes.end(),
                      [&](const GivenSolute& s) { return replaces(s, solute.name); });
      if (overridden) continue;
      const bool salt = library_.find("organic." + substance(solute.name)) == nullptr;
      if (salt) {
        add_salt(solute.name, solute.measure, exactly(Fraction(solute.amount)), true, Place{});
      } else {
        add_organic(solute.name, solute.measure, exactly(Fraction(solute.amount)), true);
      }
    }
  }

  // Any sugar of the recipe replaces the default sugars; the rest replaces its own name.
  static bool replaces(const GivenSolute& given, const std::string& name) {
    if (given.salt || name == given.name.text) return given.salt ? name == given.name.text : true;
    return kind_of(name) == SoluteKind::sugar && kind_of(given.name.text) == SoluteKind::sugar;
  }

  void add_given(const GivenSolute& given) {
    if (!given.amount.value) return;
    Uncertain<Fraction> amount = exactly(*given.amount.value);
    if (given.amount.plus_minus) {
      amount.u = *given.amount.plus_minus * (1.0 / std::sqrt(3.0));
      amount.shape = Shape::rectangular;
    } else {
      sink_.doubt_not_stated((given.salt ? "liquid.salts." : "liquid.") + given.name.text);
    }
    if (given.salt) {
      add_salt(given.name.text, measure_of(given.measure), amount, false, given.name.place);
    } else {
      add_organic(given.name.text, measure_of(given.measure), amount, false);
    }
  }

  void add_organic(const std::string& key, SoluteMeasure measure, Uncertain<Fraction> amount,
                   bool assumed) {
    if (model_.solutes.size() == kMaxSolutes) return;
    const std::string name = substance(key);
    SoluteModel solute;
    const Record& organic = library_.at("organic." + name);
    solute.name = organic.key.substr(organic.key.size() - name.size());
    solute.kind = kind_of(key);
    solute.measure = measure;
    solute.amount = amount;
    solute.assumed = assumed;
    solute.molar_mass = cited_constant<MolarMass>(library_.at("molar_mass." + name));
    solute.salting = {{organic.values[0].value, organic.values[1].value, organic.factor},
                      doubt_of(organic)};
    if (solute.kind == SoluteKind::other) {
      solute.apparent_volume =
          cited_constant<SpecificVolume>(library_.at("apparent_volume." + name));
    }
    if (solute.kind == SoluteKind::ethanol) use_ethanol();
    if (solute.kind == SoluteKind::sugar) {
      const Record& gravity = library_.at("density.sucrose_water");
      model_.sugar_gravity = {
          {gravity.values[0].value, gravity.values[1].value, gravity.values[2].value},
          doubt_of(gravity)};
    }
    model_.other_gases = doubt_of(library_.at("organic.other_gases"));
    model_.solutes.push_back(solute);
  }

  void use_ethanol() {
    const Record& vapour = library_.at("vapour.ethanol");
    model_.ethanol_vapour = {
        {vapour.values[0].value, vapour.values[1].value, vapour.values[2].value, vapour.factor},
        doubt_of(vapour)};
    const Record& activity = library_.at("activity.ethanol_water");
    model_.van_laar = {activity.values[0].value, activity.values[1].value};
    model_.van_laar_doubt = doubt_of(activity);
    const Record& density = library_.at("density.ethanol_water");
    model_.ethanol_density = {EthanolWaterDensity::from(density, zero_celsius_), doubt_of(density)};
    model_.model = doubt_of(library_.at("model.fermented"));
  }

  void add_salt(const std::string& formula, SoluteMeasure measure, Uncertain<Fraction> amount,
                bool assumed, const Place& place) {
    const Salt salt = read_salt(library_, formula);
    if (salt.ions.empty()) {
      sink_.say(salt.neutral.empty()
                    ? error("unknown-salt",
                            fmt::format("'{}' is no salt of ions known here", formula),
                            "a formula of one cation and one anion, without crystal water",
                            "salts = { NaCl = \"120 mg/L\", MgSO4 = \"40 mg/L\" }", place)
                    : error("salt-not-neutral",
                            fmt::format("'{}' is not electrically neutral; did you mean '{}'?",
                                        formula, salt.neutral),
                            "a neutral formula", "", place));
      return;
    }
    if (model_.solutes.size() == kMaxSolutes || model_.ions.size() + 2 > kMaxIons) {
      sink_.say(error("too-many-solutes", "the liquid has more solutes than can be held",
                      fmt::format("at most {}", kMaxSolutes), "", place));
      return;
    }
    SoluteModel solute;
    solute.name = salt.ions[0].ion->key;
    solute.kind = SoluteKind::salt;
    solute.measure = measure;
    solute.amount = amount;
    solute.assumed = assumed;
    solute.molar_mass.law.value = from_si<MolarMass>(salt.molar_mass);
    solute.apparent_volume = cited_constant<SpecificVolume>(library_.at("apparent_volume.salts"));
    for (const auto& ion : salt.ions) solute.ions.emplace_back(ion_index(*ion.ion), ion.count);
    model_.solutes.push_back(solute);
  }

  std::size_t ion_index(const Record& record) {
    for (std::size_t i = 0; i < model_.ions.size(); ++i) {
      if (model_.ions[i].name == record.key) return i;
    }
    model_.ions.push_back({record.key, cited_constant<MolarVolume>(record)});
    return model_.ions.size() - 1;
  }

  void add_density(const LiquidSection& given) {
    if (!given.density || !given.density->value) return;
    Uncertain<MassDensity> density = exactly(*given.density->value);
    if (given.density->plus_minus) {
      density.u = *given.density->plus_minus * (1.0 / std::sqrt(3.0));
      density.shape = Shape::rectangular;
    } else {
      sink_.doubt_not_stated("liquid.density");
    }
    model_.measured_density = density;
  }

  const Library& library_;
  const LiquidSink& sink_;
  Temperature zero_celsius_;
  LiquidModel model_;
};

}  // namespace

const Record* named_liquid(const Library& library, const std::string& name) {
  return library.find(std::string(kLiquid) + name);
}

std::vector<std::string> liquid_names(const Library& library) {
  std::vector<std::string> names;
  for (const auto& record : library.records()) {
    if (record.key.starts_with(kLiquid)) names.emplace_back(record.key.substr(kLiquid.size()));
  }
  return names;
}

const Record* relation_in_force(const Library& library, const LiquidSection* liquid,
                                const Record& named, const LiquidSink& sink) {
  const Record* usual = named.parts.empty() ? nullptr : library.find(named.parts[0]);
  if (liquid == nullptr) return usual;
  bool by_composition = false;
  if (liquid->basis) {
    by_composition = liquid->basis->text == "true";
    if (!by_composition && liquid->basis->text != "as tested") {
      sink.say(error("unknown-basis", fmt::format("no basis is called '{}'", liquid->basis->text),
                     "\"as tested\" (by the trade's relation) or \"true\" (by composition)",
                     "basis = \"true\"", liquid->basis->place));
      return nullptr;
    }
  }
  if (liquid->relation) {
    std::string name = liquid->relation->text;
    std::transform(name.begin(), name.end(), name.begin(),
                   [](unsigned char c) { return static_cast<char>(std::tolower(c)); });
    usual = library.find(std::string(kRelation) + name);
    if (usual == nullptr) {
      sink.say(error("unknown-relation",
                     fmt::format("no relation is called '{}'", liquid->relation->text),
                     "ASBC, MEBAK, OIV or water", "relation = \"MEBAK\"", liquid->relation->place));
      return nullptr;
    }
  }
  if (by_composition && liquid->relation) {
    sink.say(error("relation-unused", "by composition (basis = \"true\"), no relation is used",
                   "basis = \"as tested\" with a relation, or basis = \"true\" without",
                   "basis = \"as tested\"", liquid->relation->place));
  }
  if (by_composition) return nullptr;
  if (usual == nullptr && liquid->basis) {
    sink.say(error("no-relation", "this liquid has no relation of its trade to be tested by",
                   "basis = \"true\", or a relation (ASBC, MEBAK, OIV, water)",
                   "relation = \"water\"", liquid->basis->place));
  }
  return usual;
}

LiquidModel liquid_model(const Library& library, const LiquidSection* liquid, const Record& named,
                         Temperature zero_celsius, const LiquidSink& sink) {
  return LiquidBinder(library, sink, zero_celsius).bind(liquid, named);
}

}  // namespace capsigh::answer_detail
