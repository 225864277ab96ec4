#include "recipe_check.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "bind_package.hpp"
#include "records.hpp"

namespace capsigh::answer_detail {
namespace {

constexpr std::string_view kSelection = "selection.henry.";
constexpr std::string_view kMixture = "mixture.";

}  // namespace

Finding note(Severity severity, std::string code, std::string message, std::optional<Place> place) {
  Finding f;
  f.severity = severity;
  f.code = std::move(code);
  f.message = std::move(message);
  f.place = std::move(place);
  return f;
}

void RecipeCheck::check() {
  check_liquid();
  read_gases();
  check_contact();
  check_contents();
  check_altitude();
  if (recipe_.container) check_container(*recipe_.container);
  if (recipe_.judging) check_judging(*recipe_.judging);
  check_life();
  check_readings();
}

void RecipeCheck::error(std::string code, std::string message, std::string expected,
                        std::string example, const std::optional<Place>& place,
                        std::optional<Place> conflict) {
  Finding f = note(Severity::error, std::move(code), std::move(message), place);
  f.expected = std::move(expected);
  f.example = std::move(example);
  f.conflicts_with = std::move(conflict);
  if (!f.place) f.place = Place{recipe_.file, 0, 0, 1, ""};
  findings_.push_back(std::move(f));
}

void RecipeCheck::assume(std::string code, std::string message) {
  binding_.notes.push_back(note(Severity::assumption, std::move(code), std::move(message)));
}

// The named liquid, its relation and what is wrong with either.
void RecipeCheck::check_liquid() {
  liquid_ = recipe_.liquid ? &*recipe_.liquid : nullptr;
  const LocatedText* like = liquid_ != nullptr && liquid_->like ? &*liquid_->like : nullptr;
  binding_.liquid = like != nullptr ? like->text : "water";
  named_ = named_liquid(library_, binding_.liquid);
  if (named_ == nullptr) {
    const auto names = liquid_names(library_);
    const auto near = nearest_name(binding_.liquid, names);
    error("unknown-liquid",
          near ? fmt::format("no liquid is called '{}'; did you mean '{}'?", binding_.liquid, *near)
               : fmt::format("no liquid is called '{}'", binding_.liquid),
          fmt::format("{}", fmt::join(names, ", ")), "like = \"water\"", like->place);
    named_ = named_liquid(library_, "water");
  }
  if (like == nullptr) {
    assume("liquid-assumed", recipe_.liquid && !recipe_.liquid->solutes.empty()
                                 ? "liquid: water with what the recipe lists"
                                 : "liquid: water");
  }
  relation_ = relation_in_force(library_, liquid_, *named_, sink());
  if (liquid_ != nullptr && liquid_->volume_basis) check_volume_basis(*liquid_->volume_basis);
  check_sugars();
}

void RecipeCheck::check_volume_basis(const LocatedText& basis) {
  problem().ideal_volumes = basis.text == "ideal";
  if (basis.text == "ideal" || basis.text == "real") return;
  error("unknown-volume-basis", fmt::format("no volume basis is called '{}'", basis.text),
        "\"real\" (1 vol of CO2 is 1.977 g/L) or \"ideal\" (1.963 g/L)", "volume_basis = \"real\"",
        basis.place);
}

// Brix counts all that is dissolved; a sugar beside it would count twice.
void RecipeCheck::check_sugars() {
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

LiquidSink RecipeCheck::sink() {
  return {[this](Finding f) {
            f.severity = Severity::error;
            if (!f.place || f.place->file.empty()) f.place = Place{recipe_.file, 0, 0, 1, ""};
            findings_.push_back(std::move(f));
          },
          [this](const std::string& key) { binding_.doubt_not_stated.push_back(key); }};
}

// The gases behind a name; empty (and a finding) if there is no such gas.
NamedParts RecipeCheck::parts_of(const LocatedText& name) {
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

NamedParts RecipeCheck::mixture_parts(const Record& mixture) {
  NamedParts parts;
  for (std::size_t i = 0; i < mixture.values.size(); ++i) {
    parts.gases.emplace_back(mixture.symbols[i]);
    parts.parts.push_back(mixture.values[i].value * mixture.factor);
  }
  return parts;
}

void RecipeCheck::cite(const Record& definition) {
  auto& used = binding_.also_used;
  if (std::find(used.begin(), used.end(), &definition) == used.end()) {
    used.push_back(&definition);
  }
}

void RecipeCheck::need_gas(const std::string& name) {
  if (std::find(gases_.begin(), gases_.end(), name) == gases_.end()) gases_.push_back(name);
}

void RecipeCheck::read_gases() {
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
void RecipeCheck::need_air() {
  const Record& mixture = library_.at("mixture.air");
  air_ = mixture_parts(mixture);
  const auto* container = recipe_.container ? &*recipe_.container : nullptr;
  if (container != nullptr && container->closing_oxygen) need_gas("O2");
  if (container != nullptr && container->nitrogen_dose) need_gas("N2");
  const bool with_air =
      container != nullptr && (container->closing_air || container->closing_air_volume ||
                               !container->limit.empty() || has_shelf(*container));
  if (!recipe_.opening && !with_air) return;
  cite(mixture);
  for (const auto& gas : air_.gases) need_gas(gas);
}

void RecipeCheck::check_shares() {
  double sum = 0;
  const GivenShare* rest = nullptr;
  for (const auto& line : recipe_.gas) {
    if (line.rest && rest != nullptr) {
      error("rest-twice", "two gases cannot both take the rest", "\"rest\" for one gas only", "",
            line.name.place, rest->name.place);
    }
    if (line.rest) rest = &line;
    if (line.find) return;                        // what it needs is checked by its own rule
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

void RecipeCheck::check_contact() {
  if (recipe_.conditioning) return;  // its content is made, not met: check_conditioning_contact
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
  const int known =
      static_cast<int>(temperature) + static_cast<int>(pressure) + static_cast<int>(dissolved);
  const bool wish = std::any_of(recipe_.target.begin(), recipe_.target.end(),
                                [](const auto& t) { return !t.is_maximum && !t.is_minimum; });
  if (known == 2 || (known == 1 && !dissolved && wish)) return;
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
void RecipeCheck::check_content_gas(const GivenContent& given) {
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

void RecipeCheck::check_contents() {
  for (const auto& target : recipe_.target) check_content_gas(target.content);
  if (recipe_.contact) {
    for (const auto& content : recipe_.contact->dissolved) check_content_gas(content);
  }
  if (recipe_.container) {
    for (const auto& content : recipe_.container->filling_loss) check_content_gas(content);
    for (const auto& content : recipe_.container->limit) {
      if (content.gas.text == "CO2") check_content_gas(content);
    }
  }
  check_target_at();
  check_find();
}

void RecipeCheck::check_target_at() {
  if (!recipe_.target_at) return;
  const auto& at = *recipe_.target_at;
  if (at.text != "contact" && at.text != "package") {
    error("unknown-target-at", fmt::format("a target cannot be at '{}'", at.text),
          "\"contact\" or \"package\" (after the closed package has settled)", "at = \"package\"",
          at.place);
  } else if (at.text == "package" && !recipe_.container) {
    error("target-without-package", "a target at the package needs a [container]",
          "a [container] with brimful and fill", "", at.place);
  } else if (at.text == "package" && recipe_.contact && !recipe_.contact->temperature) {
    error("target-without-temperature",
          "a target at the package needs the temperature of the contact", "contact.temperature",
          "temperature = \"4 degC\"", at.place);
  }
}

// A blend is found for a target at a known temperature and pressure, with one other line to
// take the rest.
void RecipeCheck::check_find() {
  const GivenShare* find = nullptr;
  bool rest = false;
  for (const auto& line : recipe_.gas) {
    if (line.find && find != nullptr) {
      error("find-twice", "two gases cannot both be found", "\"find\" for one gas only", "",
            line.name.place, find->name.place);
    }
    if (line.find) find = &line;
    rest = rest || line.rest;
  }
  if (find == nullptr) return;
  const auto& contact = recipe_.contact;
  const bool ready = contact && contact->temperature && contact->pressure &&
                     !contact->dissolved_place && wanted_of(find->name.text) != nullptr;
  if (rest && ready) return;
  error("find-needs",
        fmt::format("the share of {} can be found only with contact.temperature, "
                    "contact.pressure, a [target] for it, and another gas as \"rest\"",
                    find->name.text),
        "all four", "[gas]\nCO2 = \"find\"\nN2 = \"rest\"", find->share.source.place);
}

const GivenTarget* RecipeCheck::wanted_of(const std::string& gas) const {
  const auto it = std::find_if(recipe_.target.begin(), recipe_.target.end(),
                               [&](const GivenTarget& t) { return t.content.gas.text == gas; });
  return it == recipe_.target.end() ? nullptr : &*it;
}

// The standard troposphere ends there, and nobody carbonates beyond.
void RecipeCheck::check_altitude() {
  if (!recipe_.contact || !recipe_.contact->altitude || !recipe_.contact->altitude->value) return;
  const Record& range = library_.at("atmosphere.altitude_range");
  const double metres = recipe_.contact->altitude->value->value();
  if (metres >= range.values[0].value && metres <= range.values[1].value) return;
  error("impossible-value", "'contact.altitude' is beyond the standard troposphere",
        fmt::format("{} to {} m", range.values[0].digits, range.values[1].digits),
        "altitude = \"350 m\"", recipe_.contact->altitude->source.place);
}

void RecipeCheck::check_container(const ContainerSection& container) {
  for (auto& f : check_package(container, library_)) findings_.push_back(std::move(f));
  const bool filled = container.fill || container.fill_mass;
  if (!container.brimful || !filled) {
    error("container-incomplete",
          fmt::format("[container] lacks '{}'", container.brimful ? "fill" : "brimful"),
          "brimful (the container filled to its brim) and fill or fill_mass",
          "brimful = \"355 mL\"\nfill = \"330 mL\"", container.place);
    return;
  }
  if (container.fill && container.fill_mass) {
    error("fill-twice", "the fill is given both by volume and by mass", "one of them", "",
          container.fill_mass->source.place, container.fill->source.place);
  }
  if (!container.fill) return;
  const auto& brimful = *container.brimful;
  const auto& fill = *container.fill;
  if (brimful.value && fill.value && *fill.value >= *brimful.value) {
    error("container-overfilled", "the fill leaves no headspace in the container",
          "a fill below brimful", "", fill.source.place, brimful.source.place);
  }
}

void RecipeCheck::check_judging(const JudgingSection& judging) {
  if (recipe_.target.empty() && recipe_.readable) {
    error("judging-nothing", "[judging] has nothing to judge: the recipe has no [target]",
          "a [target] with a tolerance or a limit", "[target]\nCO2 = \"3.70 vol ± 0.10 vol\"",
          judging.place);
  }
  if (judging.rule && judging.rule->text != "guarded" && judging.rule->text != "simple") {
    error("unknown-rule", fmt::format("no rule is called '{}'", judging.rule->text),
          "\"guarded\" (inside only where the doubt allows it) or \"simple\" (values are compared)",
          "rule = \"guarded\"", judging.rule->place);
  }
  if (!judging.risk || !judging.risk->value) return;
  // At half, inside and outside would overlap.
  constexpr double most = 0.5;
  if (judging.risk->value->value() < most) return;
  error("impossible-value", "a risk of half or more decides nothing", "above 0 % and below 50 %",
        "risk = \"5 %\"", judging.risk->source.place);
}

}  // namespace capsigh::answer_detail
