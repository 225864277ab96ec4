#include "words.hpp"

#include <fmt/format.h>

#include <array>
#include <vector>

#include "capsigh/quantity/grammar.hpp"

namespace capsigh::render_detail {
namespace {

using Asked = const std::vector<const Unit*>&;

// The unit in which a limit of error is spoken of: of those asked for, else our own choice.
const Unit* spoken_unit(std::string_view si_unit, std::string_view key, Asked asked) {
  struct Spoken {
    std::string_view si;
    std::string_view unit;
    Dimension dimension;
  };
  static constexpr std::array table{
      Spoken{"K", "K", Dimension::temperature_difference},
      Spoken{"Pa", "bar", Dimension::pressure},
      Spoken{"m3", "mL", Dimension::volume},
      Spoken{"m", "m", Dimension::length},
      Spoken{"kg", "g", Dimension::mass},
      Spoken{"kg/m3", "g/L", Dimension::mass_concentration},
      Spoken{"s", "min", Dimension::duration},
      Spoken{"m2", "cm2", Dimension::area},
      Spoken{"m3/s", "hL/h", Dimension::volume_flow},
  };
  const bool content = key.find("dissolved") != std::string_view::npos ||
                       key.find("filling_loss") != std::string_view::npos ||
                       key.find("residual.") != std::string_view::npos ||
                       key.find("incoming.") != std::string_view::npos;
  if (si_unit == "1") {
    return content ? find_unit("vol", Dimension::gas_volumes) : find_unit("%", Dimension::fraction);
  }
  for (const auto& row : table) {
    if (row.si != si_unit) continue;
    for (const auto* unit : asked) {
      // A difference of temperatures goes by the name of its scale.
      const bool scale = unit->dimension == Dimension::temperature &&
                         row.dimension == Dimension::temperature_difference;
      if (scale || unit->dimension == row.dimension) return unit;
    }
    return find_unit(row.unit, row.dimension);
  }
  return nullptr;
}

std::string limit_text(double si, const Improvement& i, bool down, Asked asked) {
  const Unit* unit = spoken_unit(i.unit, i.input, asked);
  const double value = unit == nullptr ? si : difference_in_unit(si, *unit);
  const auto text = down ? rounded_down(value, value) : significant(value, 2);
  return fmt::format("±\x1f{}\x1f{}", text,
                     unit == nullptr ? std::string_view(i.unit) : unit->text);
}

std::string_view instrument(std::string_view key) {
  if (key.ends_with("temperature")) return "a thermometer";
  if (key == "contact.ambient") return "a barometer";
  if (key.ends_with("pressure")) return "a gauge";
  return "an input";
}

}  // namespace

std::string advice_text(const Advice& advice, std::string_view would,
                        const std::vector<const Unit*>& asked) {
  if (!advice.inputs_stated) {
    return "from published constants alone: the inputs that enter state no ±, and count as exact";
  }
  if (advice.by == Advice::By::none) {
    return fmt::format(
        "no instrument would {}: with perfect ones {} % of the doubt stays, from "
        "published constants",
        would, significant(100 * advice.records_alone, 2));
  }
  std::string text;
  for (const auto& i : advice.improvements) {
    text += fmt::format("{}{} good to {} ({}, now {})", text.empty() ? "" : " and ",
                        instrument(i.input), limit_text(i.needed, i, true, asked), i.input,
                        limit_text(i.now, i, false, asked));
  }
  const bool together = advice.by == Advice::By::instruments && advice.improvements.size() > 1;
  return text + (together ? " together would " : " would ") + std::string(would);
}

std::string shares_text(const std::vector<BudgetLine>& lines) {
  constexpr double worth_naming = 0.01;
  std::string text;
  for (const auto& line : lines) {
    if (line.share < worth_naming) break;
    text += fmt::format("{}{} {:.0f}\x1f%", text.empty() ? "" : ", ", line.input, 100 * line.share);
  }
  return text;
}

std::string figure_label(std::string_view path) {
  const auto between = [&](std::string_view head) {
    const auto rest = path.substr(head.size());
    return std::string(rest.substr(0, rest.find('.')));
  };
  if (path.starts_with("dissolved.")) return "Dissolved " + between("dissolved.");
  if (path == "condition.temperature") return "Temperature";
  if (path == "condition.pressure_gauge") return "Pressure";
  if (path.starts_with("saturation.")) return "Needed for " + between("saturation.");
  if (path == "wine.pressure_gauge") return "Gauge at 20 °C";
  if (path.starts_with("blend.")) return between("blend.") + " in the gas";
  if (path.starts_with("container.at.")) return "Pressure in the package";
  if (path == "conditioning.dose") return "Sugar needed";
  if (path == "conditioning.pressure_gauge") return "Pressure once conditioned";
  if (path == "supply.per_hectolitre") return "Gas per hectolitre";
  return std::string(path);
}

}  // namespace capsigh::render_detail
