#include "report_package.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "capsigh/quantity/grammar.hpp"
#include "recipe_check.hpp"
#include "records.hpp"

namespace capsigh::answer_detail {
namespace {

std::string bar(double pascal) {
  return significant(in_unit(pascal, *find_unit("bar", Dimension::pressure)), 3) + " bar";
}

std::string percent(Fraction f) {
  return significant(in_unit(f.value(), *find_unit("%", Dimension::fraction)), 3) + " %";
}

// What can hurt someone comes first on the page, and is no answer to be content with.
void danger(Report& report, std::string code, std::string message) {
  report.limits_met = false;
  report.cautions.insert(report.cautions.begin(),
                         caution(std::move(code), "DANGER: " + std::move(message)));
}

void join(std::string& list, const std::string& part) { list += (list.empty() ? "" : "; ") + part; }

// At whatever temperature the recipe names.
void judge_rating(Report& report) {
  std::string above;
  const auto judge = [&](const Figure<Pressure>& margin, const Figure<Temperature>& at) {
    if (!margin.asked || margin.value.value() >= 0) return;
    join(above, above.empty()
                    ? fmt::format("at {} the package stands above its rating by {}",
                                  celsius(at.value), bar(-margin.value.value()))
                    : fmt::format("at {} by {}", celsius(at.value), bar(-margin.value.value())));
  };
  const auto& a = report.answer;
  bool opened_elsewhere = true;
  for (const auto& c : a.package.at) {
    judge(c.margin, c.temperature);
    if (c.temperature.value == a.opening_temperature.value) opened_elsewhere = false;
  }
  if (opened_elsewhere) judge(a.opening_margin, a.opening_temperature);
  judge(a.conditioning.margin, a.conditioning.temperature);
  if (!above.empty()) danger(report, "over-rating", above);
}

// Storage temperatures at which the package has no state.
void caution_stateless(const Case& c, const Library& library, Report& report) {
  std::string full;
  std::string beyond;
  std::string frozen;
  for (const auto& f : report.answer.package.at) {
    if (!f.without_state) continue;
    const bool is_full = *f.without_state == RefusalCode::container_without_space;
    const bool is_frozen = *f.without_state == RefusalCode::temperature_beyond_model;
    join(is_full ? full : is_frozen ? frozen : beyond, "at " + celsius(f.temperature.value));
  }
  if (!frozen.empty()) {
    report.limits_met = false;
    report.cautions.push_back(caution(
        "frozen-solid",
        fmt::format("{} the liquid freezes, which it begins to at about {}: there is no figure. "
                    "Ice takes up more room than water and can burst the package",
                    frozen, celsius(freezing_point(c, library)))));
  }
  if (!beyond.empty()) {
    danger(report, "beyond-gas-law",
           fmt::format("{} the pressure in the package is {} abs or more, where the gas law ends: "
                       "there is no figure, and hardly a package that bears it",
                       beyond, bar(c.medium.pressure_limit.value())));
  }
  if (!full.empty()) {
    const auto& from = report.answer.package.liquid_full;
    danger(report, "liquid-full",
           fmt::format("{} the liquid fills the whole package{}: its pressure has no upper bound",
                       full, from.asked ? ", from " + celsius(from.value) + " on" : ""));
  }
}

void caution_frost(const Case& c, const Library& library, Report& report) {
  const ContainerFigures* coldest = nullptr;
  for (const auto& f : report.answer.package.at) {
    if (f.without_state) continue;
    if (coldest == nullptr || f.temperature.value < coldest->temperature.value) coldest = &f;
  }
  const auto freezing = freezing_point(c, library);
  if (coldest == nullptr || c.container->storage.empty()) return;
  if (coldest->temperature.value >= freezing) return;
  report.cautions.push_back(caution(
      "storage-below-freezing",
      fmt::format("stored at {} the liquid may be frozen: it freezes at about {}, and ice takes up "
                  "more room than water and can burst the package",
                  celsius(coldest->temperature.value), celsius(freezing))));
}

void caution_vacuum(Report& report) {
  const ContainerFigures* lowest = nullptr;
  for (const auto& f : report.answer.package.at) {
    if (f.without_state || f.pressure_gauge.value.above_ambient().value() >= 0) continue;
    if (lowest == nullptr || f.pressure_gauge.value < lowest->pressure_gauge.value) lowest = &f;
  }
  if (lowest == nullptr) return;
  report.cautions.push_back(
      caution("vacuum",
              fmt::format("at {} the package stands under a vacuum of {}: soft walls draw in, and "
                          "a leak takes in air",
                          celsius(lowest->temperature.value),
                          bar(-lowest->pressure_gauge.value.above_ambient().value()))));
}

void judge_ullage(const Case& c, Report& report) {
  if (!c.container->minimum_ullage) return;
  std::string below;
  for (const auto& f : report.answer.package.at) {
    if (f.without_state || f.ullage.value >= *c.container->minimum_ullage) continue;
    join(below, fmt::format("{} at {}", percent(f.ullage.value), celsius(f.temperature.value)));
  }
  if (below.empty()) return;
  report.limits_met = false;
  report.cautions.push_back(
      caution("ullage-below-minimum", fmt::format("the ullage is {}, below the {} asked for", below,
                                                  percent(*c.container->minimum_ullage))));
}

void caution_heat(const Case& c, const Library& library, Report& report) {
  const auto hot = constant<Temperature>(library, "assumed.hot_storage");
  const auto& at = report.answer.package.at;
  const bool any = std::any_of(at.begin(), at.end(), [&](const ContainerFigures& f) {
    return !c.container->storage.empty() && f.temperature.value >= hot;
  });
  if (!any) return;
  report.cautions.push_back(caution(
      "hot-storage",
      "hot packages are at their most dangerous: keep people away while they are hot. In a "
      "pasteuriser equilibrium is an upper bound, real packages read lower; after hours in a car "
      "or in the sun they reach it"));
}

}  // namespace

Finding caution(std::string code, std::string message) {
  return note(Severity::caution, std::move(code), std::move(message));
}

std::string celsius(Temperature t) {
  return significant(in_unit(t.kelvin(), *find_unit("°C", Dimension::temperature)), 3) + " °C";
}

Temperature freezing_point(const Case& c, const Library& library) {
  const auto liquid = compose(c.medium.liquid, c.medium.content_temperature);
  const double constant = library.at("freezing.water").values[0].value;
  const double water = liquid.x_water.value() * liquid.particles.value() *
                       c.medium.liquid.water_molar_mass.law.value.value();
  const double dissolved = (1 - liquid.x_water.value()) * liquid.particles.value() / water;
  return c.medium.zero_celsius - from_si<TemperatureDifference>(constant * dissolved);
}

void caution_package(const Case& c, const Library& library, Report& report) {
  if (!c.container) return;
  report.cautions.push_back(
      caution("package-pressure",
              "pressurised packages can burst: compare with the container maker's rating at the "
              "warmest it will get; local codes and the maker decide, not this figure"));
  caution_heat(c, library, report);
  caution_frost(c, library, report);
  caution_vacuum(report);
  judge_ullage(c, report);
  caution_stateless(c, library, report);
  judge_rating(report);
}

void describe_package(const Recipe& recipe, const ContainerCase& container, Report& report) {
  report.stored = !container.storage.empty();
  for (const auto& limit : recipe.container->limit) {
    report.package_limits.emplace_back(limit.gas.text, limit.amount.source.text);
  }
  if (!container.shelf) return;
  const double weeks =
      in_unit(container.shelf->times.back().value(), *find_unit("wk", Dimension::duration));
  report.longest_shelf_life = significant(weeks, 3) + " wk";
}

void judge_package(const JudgingRule& rule, Report& report) {
  const auto& oxygen = report.answer.package.oxygen;
  if (oxygen.limit) {
    const auto judgement = judge(oxygen.total.value.value(), oxygen.total.u.value(),
                                 Interval{0, oxygen.limit->value()}, rule);
    if (judgement.verdict != Verdict::inside) {
      report.limits_met = false;
      report.cautions.push_back(caution(
          "oxygen-over-limit",
          judgement.verdict == Verdict::outside
              ? "the package is closed with more oxygen, dissolved and in the headspace, than its "
                "limit allows"
              : "whether the package is closed with less oxygen than its limit allows cannot be "
                "told"));
    }
  }
  std::string below;
  for (const auto& s : report.answer.package.shelf_life) {
    if (s.until_co2.asked && s.until_co2.value.value() <= 0) {
      join(below, "at " + celsius(s.temperature.value));
    }
  }
  if (below.empty()) return;
  report.limits_met = false;
  report.cautions.push_back(
      caution("content-below-limit",
              below + " the liquid holds less CO2 than its limit from the first day: a warm "
                      "headspace takes its share"));
}

}  // namespace capsigh::answer_detail
