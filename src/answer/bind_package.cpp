#include "bind_package.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "bind_input.hpp"
#include "capsigh/quantity/grammar.hpp"
#include "recipe_check.hpp"
#include "records.hpp"

namespace capsigh::answer_detail {
namespace {

constexpr std::string_view kContainer = "container.";
constexpr std::string_view kStretch = ".stretch";

std::string kind_key(const ContainerSection& given, std::string_view what) {
  return fmt::format("container.{}.{}", given.kind->text, what);
}

Finding fault(std::string code, std::string message, std::string expected, std::string example,
              const Place& place) {
  Finding f = note(Severity::error, std::move(code), std::move(message), place);
  f.expected = std::move(expected);
  f.example = std::move(example);
  return f;
}

bool names(const std::vector<GivenTransmission>& wall, std::string_view gas) {
  return std::any_of(wall.begin(), wall.end(),
                     [&](const GivenTransmission& w) { return w.gas.text == gas; });
}

void check_kind(const ContainerSection& container, const Library& library, Findings& findings) {
  if (!container.kind) return;
  const auto kinds = container_kinds(library);
  const auto& kind = *container.kind;
  if (std::find(kinds.begin(), kinds.end(), kind.text) != kinds.end()) return;
  const auto near = nearest_name(kind.text, kinds);
  findings.push_back(fault(
      "unknown-kind",
      near
          ? fmt::format("no kind of container is called '{}'; did you mean '{}'?", kind.text, *near)
          : fmt::format("no kind of container is called '{}'", kind.text),
      fmt::format("{}", fmt::join(kinds, ", ")), "kind = \"can\"", kind.place));
}

// Only CO2 and O2 are followed through a wall.
void check_gas(const LocatedText& gas, std::string_view key, std::string_view example,
               Findings& findings) {
  if (gas.text == "CO2" || gas.text == "O2") return;
  findings.push_back(fault(
      "not-followed", fmt::format("'container.{}' is for CO2 and O2, not for '{}'", key, gas.text),
      "CO2 (that is lost) or O2 (that comes in)", std::string(example), gas.place));
}

void check_limits(const ContainerSection& container, Findings& findings) {
  for (const auto& limit : container.limit) {
    check_gas(limit.gas, "limit", "limit = { CO2 = \"3.4 vol\" }", findings);
    if (limit.amount.plus_minus) {
      findings.push_back(fault(
          "limit-with-doubt", fmt::format("the limit of {} has a ±", limit.gas.text),
          "a limit as one value", "limit = { CO2 = \"3.4 vol\" }", limit.amount.source.place));
    }
    const bool known = container.kind || names(container.wall, "CO2");
    if (limit.gas.text == "CO2" && !known) {
      findings.push_back(fault(
          "limit-needs-wall",
          "how long the CO2 stays above its limit depends on the wall, of which nothing is known",
          "what the wall lets through, or the kind of container", "wall = { CO2 = \"1.1 mL/d\" }",
          limit.gas.place));
    }
  }
  if (container.minimum_ullage && container.minimum_ullage->plus_minus) {
    findings.push_back(fault("limit-with-doubt", "'container.minimum_ullage' has a ±",
                             "a limit as one value", "minimum_ullage = \"3 %\"",
                             container.minimum_ullage->source.place));
  }
}

std::string celsius(Temperature t) {
  return significant(in_unit(t.kelvin(), *find_unit("°C", Dimension::temperature)), 3) + " °C";
}

void assume(Binding& binding, std::string code, std::string message) {
  binding.notes.push_back(note(Severity::assumption, std::move(code), std::move(message)));
}

void bind_stretch(const ContainerSection& given, const Library& library, Binding& binding,
                  ContainerCase& container) {
  if (given.stretch) {
    container.stretch = take(binding, "container.stretch", *given.stretch);
  } else if (given.kind) {
    const Record& record = library.at(kind_key(given, "stretch"));
    container.typical_stretch = cited_constant<Compliance>(record);
    assume(binding, "stretch-assumed",
           fmt::format("the container stretches by {} {}, typical of its kind ({}), u {}",
                       record.values[0].digits, record.unit, given.kind->text,
                       record.uncertainty.printed));
  }
}

// What passes the wall of one gas; nullopt where nothing is known or the gas is not there.
std::optional<WallCase> wall_of(const ContainerSection& given, const Library& library,
                                Binding& binding, const std::string& gas) {
  const auto& gases = binding.problem.medium.gases;
  WallCase wall;
  while (wall.gas < gases.size() && gases[wall.gas].name != gas) ++wall.gas;
  if (wall.gas >= gases.size()) return std::nullopt;
  const bool carbon_dioxide = gas == "CO2";
  const auto stated = std::find_if(given.wall.begin(), given.wall.end(),
                                   [&](const GivenTransmission& w) { return w.gas.text == gas; });
  if (stated != given.wall.end()) {
    wall.stated = take(binding, "container.wall." + gas, stated->amount);
  } else if (given.kind) {
    const Record& record = library.at(kind_key(given, gas));
    wall.typical = cited_constant<Transmission>(record);
    assume(binding, "wall-assumed",
           fmt::format("{} through wall and closure: {} {} a package, typical of its kind ({}), "
                       "u {}; state 'wall' for yours",
                       gas, record.values[0].digits, record.unit, given.kind->text,
                       record.uncertainty.printed));
  } else {
    return std::nullopt;
  }
  wall.as_filled = carbon_dioxide && wall.stated.has_value();
  wall.difference = carbon_dioxide
                        ? constant<Pressure>(library, "container.transmission.difference")
                        : binding.problem.air[wall.gas] * binding.problem.medium.atmosphere;
  return wall;
}

void bind_shelf(const ContainerSection& given, const Library& library, Binding& binding,
                ContainerCase& container) {
  if (!has_shelf(given)) return;
  ShelfCase shelf;
  shelf.activation = cited_constant<MolarEnergy>(library.at("container.transmission.activation"));
  shelf.reference = constant<Temperature>(library, "container.transmission.temperature");
  bool as_filled = false;
  for (const std::string gas : {"CO2", "O2"}) {
    const auto wall = wall_of(given, library, binding, gas);
    if (!wall) continue;
    shelf.wall.push_back(*wall);
    as_filled = as_filled || wall->as_filled;
  }
  for (const auto* key : {"container.shelf.course", "container.shelf.longest"}) {
    const Record& record = library.at(key);
    for (const auto& value : record.values) {
      if (shelf.times.size() < kMaxMarch) {
        shelf.times.push_back(from_si<Duration>(value.value * record.factor));
      }
    }
    if (shelf.shown == 0) shelf.shown = std::min(shelf.times.size(), kMaxCourse);
  }
  const Record& energy = library.at("container.transmission.activation");
  assume(binding, "wall-reference",
         fmt::format(
             "what passes the wall is taken to hold at {}, of CO2 {}, of O2 against air; it goes "
             "with the partial pressures, and with the temperature by an activation energy of {} "
             "{} (u {})",
             celsius(shelf.reference),
             as_filled
                 ? "from this package as filled"
                 : fmt::format("at {} bar of it",
                               significant(in_unit(constant<Pressure>(
                                                       library, "container.transmission.difference")
                                                       .value(),
                                                   *find_unit("bar", Dimension::pressure)),
                                           2)),
             energy.values[0].digits, energy.unit, energy.uncertainty.printed));
  assume(binding, "shelf-without-reactions",
         "on the shelf nothing uses oxygen up, nitrogen stays, and the wall does not creep");
  container.shelf = shelf;
}

}  // namespace

std::vector<std::string> container_kinds(const Library& library) {
  std::vector<std::string> kinds;
  for (const auto& record : library.records()) {
    if (!record.key.starts_with(kContainer) || !record.key.ends_with(kStretch)) continue;
    kinds.emplace_back(record.key.substr(kContainer.size(),
                                         record.key.size() - kContainer.size() - kStretch.size()));
  }
  return kinds;
}

bool has_shelf(const ContainerSection& container) {
  return !container.wall.empty() || (container.kind && !container.limit.empty());
}

Findings check_package(const ContainerSection& container, const Library& library) {
  Findings findings;
  check_kind(container, library, findings);
  for (const auto& w : container.wall) {
    check_gas(w.gas, "wall", "wall = { O2 = \"0.02 mL/d\" }", findings);
  }
  check_limits(container, findings);
  if (container.storage.size() > kMaxStorage) {
    findings.push_back(fault(
        "storage-too-long",
        fmt::format("'container.storage' lists {} temperatures", container.storage.size()),
        fmt::format("at most {}", kMaxStorage), "", container.storage[kMaxStorage].source.place));
  }
  return findings;
}

void bind_package(const ContainerSection& given, const Library& library, Binding& binding,
                  ContainerCase& container) {
  bind_stretch(given, library, binding, container);
  for (const auto& t : given.storage) {
    container.storage.push_back(take(binding, "container.storage", t));
  }
  if (given.minimum_ullage) container.minimum_ullage = *given.minimum_ullage->value;
  bind_shelf(given, library, binding, container);
  if (!given.kind) return;
  if (const Record* hazard = library.find("hazard.container." + given.kind->text)) {
    binding.notes.push_back(
        note(Severity::caution, "container-kind", std::string(hazard->definition)));
  }
}

}  // namespace capsigh::answer_detail
