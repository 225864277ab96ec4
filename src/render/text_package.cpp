#include "text_package.hpp"

#include <algorithm>
#include <cmath>

namespace capsigh::render_detail {
namespace {

// Of a table: the first of the units asked for, else our own.
const Unit& first_unit(const TextPage& page, Dimension dimension, std::string_view own) {
  return *page.units(dimension, own).front();
}

std::string why(const ContainerFigures& c) {
  if (*c.without_state == RefusalCode::container_without_space) return "FULL OF LIQUID";
  if (*c.without_state == RefusalCode::temperature_beyond_model) return "frozen, no figure";
  return "beyond the gas law, no figure";
}

std::string temperature(const TextPage& page, const Figure<Temperature>& t) {
  const auto& in = first_unit(page, Dimension::temperature, "°C");
  return significant(in_unit(si_value(t.value), in), 3) + " " + std::string(in.text);
}

void stored(TextPage& page, const ContainerFigures& c) {
  const std::string label = "Stored at " + temperature(page, c.temperature);
  if (c.without_state) {
    page.line(label, why(c), "see cautions");
    return;
  }
  std::string rating;
  if (c.margin.asked) {
    const auto& in = first_unit(page, Dimension::pressure, "bar");
    const double margin = in_unit(c.margin.value.value(), in);
    rating = fmt::format("{} {} {} rating", significant(std::abs(margin), 3), in.text,
                         margin < 0 ? "ABOVE" : "below");
  }
  page.line(label, page.in_units(c.pressure_gauge, Dimension::pressure, "bar", " gauge"), rating);
}

void inverses(TextPage& page, const PackageFigures& p) {
  if (p.closing_gauge.asked) {
    page.line("To be read on the line",
              page.in_units(p.closing_gauge, Dimension::pressure, "bar", " gauge"),
              "settled, at " + page.celsius(p.closing_temperature));
  }
  if (p.safe_temperature.asked) {
    page.line("Reaches its rating at", page.celsius(p.safe_temperature));
  }
  if (p.liquid_full.asked) page.line("Full of liquid from", page.celsius(p.liquid_full));
  if (p.largest_fill.asked) {
    page.line("Largest fill", page.in_units(p.largest_fill, Dimension::volume, "mL"),
              "for ullage and rating, hottest");
  }
}

void oxygen(TextPage& page, const OxygenFigures& o) {
  if (!o.total.asked) return;
  page.line("Oxygen in the package", page.in_units(o.total, Dimension::mass_concentration, "mg/L"),
            page.in_units(o.per_package, Dimension::mass, "ug"));
  if (o.dissolved.asked) {
    page.line("  dissolved", page.in_units(o.dissolved, Dimension::mass_concentration, "mg/L"));
    page.line("  in the headspace",
              page.in_units(o.headspace, Dimension::mass_concentration, "mg/L"));
  }
  if (o.allowed_air.asked) {
    page.line("  air its limit allows", page.in_units(o.allowed_air, Dimension::volume, "mL"),
              "in the headspace at closing");
  }
}

void keeps(TextPage& page, const Report& report, const ShelfLifeFigures& s) {
  const std::string label = "Keeps at " + temperature(page, s.temperature);
  const auto& week = unit("wk", Dimension::duration);
  if (s.until_limit.asked) {
    std::string limit;
    for (const auto& [gas, text] : report.package_limits) {
      if (gas == s.gas) limit = text;
    }
    page.line(label, shown(s.until_limit, week), fmt::format("until {} is at {}", s.gas, limit));
  } else if (!report.package_limits.empty() && s.course.front().after.asked) {
    page.line(label, "no limit is reached", "in " + report.longest_shelf_life);
  }
}

// What a table shows of a state beside its pressure: CO2, or the gas there is most of.
const GasFigures* leading(const ContainerFigures& c) {
  const auto more = [](const GasFigures& a, const GasFigures& b) {
    return a.mass_concentration.value < b.mass_concentration.value;
  };
  const auto it = std::max_element(c.gases.begin(), c.gases.end(), more);
  return it == c.gases.end() ? nullptr : &*it;
}

const GasFigures* named(const ContainerFigures& c, std::string_view gas) {
  const auto it = std::find_if(c.gases.begin(), c.gases.end(),
                               [&](const GasFigures& g) { return g.gas == gas; });
  return it == c.gases.end() ? nullptr : &*it;
}

constexpr std::size_t kFirst = 11;

// "1.58 ± 0.04": without the unit.
template <class Q>
std::string number(const Figure<Q>& figure, const Unit& in) {
  const double value = in_unit(si_value(figure.value), in);
  const double expanded = kCoverage * difference_in_unit(si_value(figure.u), in);
  const auto [digits, plus_minus] = rounded(value, expanded);
  return digits + (plus_minus.empty() ? "" : " ± ") + plus_minus;
}

// Cells under each other, `width` columns each, the first `first`.
void row(TextPage& page, const std::vector<std::string>& cells, std::size_t first,
         std::size_t width) {
  std::string text = "  ";
  for (std::size_t i = 0; i < cells.size(); ++i) {
    text += padded(cells[i], i == 0 ? first : width);
  }
  while (!text.empty() && text.back() == ' ') text.pop_back();
  page.out += text + "\n";
}

void table_of_states(TextPage& page, const PackageFigures& p, std::string_view gas,
                     bool by_volume) {
  const auto& bar = first_unit(page, Dimension::pressure, "bar");
  const auto& vol =
      by_volume ? unit("vol", Dimension::gas_volumes) : unit("mg/L", Dimension::mass_concentration);
  constexpr std::size_t width = 18;
  row(page,
      {"", std::string(bar.text) + " gauge", std::string(bar.text) + " abs",
       fmt::format("{}, {}", gas, vol.text), "ullage, %"},
      kFirst, width);
  for (const auto& c : p.at) {
    const std::string at = temperature(page, c.temperature);
    if (c.without_state) {
      row(page, {at, why(c)}, kFirst, width);
      continue;
    }
    const auto* g = named(c, gas);
    row(page,
        {at, number(c.pressure_gauge, bar), number(c.pressure_absolute, bar),
         by_volume ? number(g->volumes, vol) : number(g->mass_concentration, vol),
         number(c.ullage, unit("%", Dimension::fraction))},
        kFirst, width);
  }
}

// What the headspace is made of, as partial pressures; gases that are nowhere to be found are left
// out.
void table_of_headspace(TextPage& page, const PackageFigures& p) {
  constexpr std::size_t width = 11;
  constexpr double nothing = 1e-9;  // Pa
  const auto& bar = first_unit(page, Dimension::pressure, "bar");
  const auto digits = [&](const Figure<Pressure>& f) {
    return significant(in_unit(f.value.value(), bar), 3);
  };
  std::vector<std::string_view> gases;
  for (const auto& g : p.at.front().gases) {
    const bool somewhere = std::any_of(p.at.begin(), p.at.end(), [&](const auto& c) {
      return named(c, g.gas)->partial_pressure.value.value() > nothing;
    });
    if (somewhere && gases.size() < 4) gases.push_back(g.gas);
  }
  std::vector<std::string> head{"of that"};
  for (const auto gas : gases) head.push_back(fmt::format("{}, {}", gas, bar.text));
  const bool ethanol =
      std::any_of(p.at.begin(), p.at.end(), [](const auto& c) { return c.ethanol.asked; });
  head.emplace_back("water");
  if (ethanol) head.emplace_back("ethanol");
  row(page, head, kFirst, width);
  for (const auto& c : p.at) {
    if (c.without_state) continue;
    std::vector<std::string> cells{temperature(page, c.temperature)};
    for (const auto gas : gases) cells.push_back(digits(named(c, gas)->partial_pressure));
    cells.push_back(digits(c.vapour));
    if (ethanol) cells.push_back(digits(c.ethanol));
    row(page, cells, kFirst, width);
  }
}

// One figure of the course, up to four storage temperatures side by side.
template <class Get>
void table_of_course(TextPage& page, const PackageFigures& p, std::string_view what, const Unit& in,
                     Get&& get) {
  constexpr std::size_t side_by_side = 4;
  constexpr std::size_t width = 16;
  const auto& week = unit("wk", Dimension::duration);
  for (std::size_t first = 0; first < p.shelf_life.size(); first += side_by_side) {
    const std::size_t last = std::min(first + side_by_side, p.shelf_life.size());
    page.section(fmt::format("On the shelf: {}, {}", what, in.text));
    std::vector<std::string> head{"after"};
    for (std::size_t i = first; i < last; ++i) {
      head.push_back("at " + temperature(page, p.shelf_life[i].temperature));
    }
    row(page, head, kFirst, width);
    const auto& times =
        *std::find_if(p.shelf_life.begin(), p.shelf_life.end(),
                      [](const ShelfLifeFigures& s) { return s.course.front().after.asked; });
    for (std::size_t j = 0; j < times.course.size(); ++j) {
      std::vector<std::string> cells{shortest(in_unit(times.course[j].after.value.value(), week)) +
                                     " wk"};
      for (std::size_t i = first; i < last; ++i) {
        const auto& figure = get(p.shelf_life[i].course[j]);
        cells.push_back(figure.asked ? number(figure, in) : "-");
      }
      row(page, cells, kFirst, width);
    }
  }
}

}  // namespace

void rating(TextPage& page, const Figure<Pressure>& margin, const Figure<Temperature>& at) {
  if (!margin.asked) return;
  const bool above = margin.value.value() < 0;
  page.line(above ? "  ABOVE ITS RATING, margin" : "  below its rating by",
            page.in_units(margin, Dimension::pressure, "bar"), "at " + page.celsius(at));
}

void package_answer(TextPage& page, const Report& report) {
  const auto& p = report.answer.package;
  if (p.at.size() == 1 && !report.stored) {
    const auto& c = p.at.front();
    page.pressures("In the closed package", c.pressure_gauge, c.pressure_absolute);
    rating(page, c.margin, c.temperature);
  } else {
    for (const auto& c : p.at) stored(page, c);
  }
  inverses(page, p);
  oxygen(page, p.oxygen);
  for (const auto& s : p.shelf_life) keeps(page, report, s);
}

void package_states(TextPage& page, const PackageFigures& p) {
  if (p.at.empty()) return;
  page.section("In the closed package, at equilibrium");
  if (p.at.size() == 1 && !p.at.front().without_state) {
    const auto& c = p.at.front();
    page.line("Temperature", page.celsius(c.temperature));
    page.pressures("Pressure", c.pressure_gauge, c.pressure_absolute);
    page.line("Ullage", shown(c.ullage, unit("%", Dimension::fraction), " of brimful"));
    for (const auto& g : c.gases) page.gas(g);
    return;
  }
  const auto* lead = leading(p.at.front());
  for (const auto& c : p.at) {
    if (!c.without_state) lead = leading(c);
  }
  if (lead == nullptr) return;
  table_of_states(page, p, lead->gas, !is_trace(*lead));
  table_of_headspace(page, p);
}

void package_shelf(TextPage& page, const PackageFigures& p) {
  const auto known = [&](auto&& asked) {
    return std::any_of(p.shelf_life.begin(), p.shelf_life.end(), [&](const ShelfLifeFigures& s) {
      return !s.course.empty() && asked(s.course.front());
    });
  };
  if (known([](const CoursePoint& c) { return c.volumes.asked && c.volumes.value.value() > 0; })) {
    table_of_course(
        page, p, "CO2 in the liquid", unit("vol", Dimension::gas_volumes),
        [](const CoursePoint& c) -> const auto& { return c.volumes; });
  }
  if (known([](const CoursePoint& c) { return c.oxygen.asked; })) {
    table_of_course(
        page, p, "oxygen, dissolved and in the headspace",
        first_unit(page, Dimension::mass_concentration, "mg/L"),
        [](const CoursePoint& c) -> const auto& { return c.oxygen; });
  }
}

}  // namespace capsigh::render_detail
