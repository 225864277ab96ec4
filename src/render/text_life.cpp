#include "text_life.hpp"

#include <cmath>

namespace capsigh::render_detail {
namespace {

constexpr auto kPressure = Dimension::pressure;
constexpr auto kContent = Dimension::mass_concentration;

// A time in the unit in which it is neither tiny nor huge; one without doubt as it was written.
std::string time(const Figure<Duration>& t) {
  const double seconds = si_value(t.value);
  constexpr double most = 59;  // of a unit, before the next one is read more easily
  std::string_view best = "s";
  for (const std::string_view next : {"min", "h", "d"}) {
    if (seconds > most * unit(best, Dimension::duration).factor) best = next;
  }
  const auto& in = unit(best, Dimension::duration);
  if (t.u.value() > 0) return shown(t, in);
  constexpr int digits = 4;
  const double number = in_unit(seconds, in);
  const bool whole = number == std::floor(number);
  return fmt::format("{} {}", whole ? shortest(number) : significant(number, digits), best);
}

// Mass of gas: grams, or milligrams where there is little.
std::string mass(const TextPage& page, const Figure<Mass>& m) {
  constexpr double little = 1e-4;  // kg
  return page.in_units(m, Dimension::mass, m.value.value() < little ? "mg" : "g");
}

// Length of a nucleus in micrometres, which no recipe uses.
std::string micrometres(const Figure<Length>& r) {
  const Unit um{"µm", Dimension::length, json_unit::micrometre.factor, 0, Reference::none};
  return shown(r, um);
}

void contents(TextPage& page, const PerGas<GasFigures>& gases) {
  for (const auto& g : gases) page.gas(g, "  ");
}

void loss_share(TextPage& page, const std::string& label, const LossShare& s) {
  if (!s.share.asked) return;
  page.line(label, shown(s.share, unit("%", Dimension::fraction)),
            shown(s.volumes, unit("vol", Dimension::gas_volumes)));
}

void course(TextPage& page, const OpenedFigures& o) {
  if (o.half_life.asked) page.line("Half of the CO2 escapes in", time(o.half_life));
  if (o.fizz_until.asked) page.line("Bubbles rise for", time(o.fizz_until));
  for (const auto& moment : o.course) {
    page.line("After " + time(moment.after),
              moment.lost.asked ? mass(page, moment.lost) + " of CO2 lost" : "");
    contents(page, moment.gases);
  }
}

void margin(TextPage& page, const ConditioningFigures& c) {
  const std::string at = page.celsius(c.temperature);
  if (!c.margin.asked) {
    page.line("  at", at);
    return;
  }
  page.line(c.margin.value.value() < 0 ? "  ABOVE ITS RATING, margin" : "  below its rating by",
            page.in_units(c.margin, kPressure, "bar"), "at " + at);
}

}  // namespace

void life_answers(TextPage& page, const Report& r) {
  const auto& c = r.answer.conditioning;
  if (c.dose.asked) {
    page.line(c.dose_found ? "Sugar needed" : "Sugar", page.in_units(c.dose, kContent, "g/L"));
    page.pressures("Pressure once conditioned", c.pressure_gauge, c.pressure_absolute);
    margin(page, c);
  }
  const auto& s = r.answer.supply;
  const auto each = page.in_units(s.per_hectolitre, Dimension::mass, "kg", "/hL");
  if (s.gas_flow.asked) {
    page.line("Gas needed", page.in_units(s.gas_flow, Dimension::mass_flow, "kg/h"), each);
  }
  if (s.gas_mass.asked) {
    page.line("Gas needed", page.in_units(s.gas_mass, Dimension::mass, "kg"), each);
  }
}

void opened_rows(TextPage& page, const Report& r) {
  const auto& o = r.answer.opened;
  if (o.total.asked) {
    page.line("All CO2 inside before", mass(page, o.total));
    if (!r.answer.package.at.empty()) loss_share(page, "  from the headspace", o.headspace);
    loss_share(page, "  as fizz", o.fizz);
    loss_share(page, "  going flat in air", o.flat);
  }
  if (o.cold_gas.asked) page.line("Headspace gas, at the coldest", page.celsius(o.cold_gas));
  if (o.supersaturation.asked) {
    const Unit times{"times equilibrium", Dimension::fraction, 1, 0, Reference::none};
    page.line("Supersaturation", shown(o.supersaturation, times));
  }
  if (o.nucleus.asked) page.line("Bubbles grow from nuclei of", micrometres(o.nucleus), "radius");
  course(page, o);
  if (!o.reclosed_gauge.asked) return;
  page.pressures("Closed again", o.reclosed_gauge, o.reclosed_absolute);
  contents(page, o.reclosed);
}

void conditioning_section(TextPage& page, const Report& r) {
  const auto& c = r.answer.conditioning;
  if (!c.dose.asked) return;
  page.section("Conditioning in the package, per degassed litre");
  page.line("Sugar dosed", page.in_units(c.dose, kContent, "g/L"));
  page.line("CO2 before (residual)", page.in_units(c.residual, kContent, "g/L"));
  page.line("CO2 produced", page.in_units(c.produced, kContent, "g/L"));
  page.line("CO2 together", page.in_units(c.content, kContent, "g/L"));
  page.line("Alcohol added", shown(c.ethanol_added, unit("% v/v", Dimension::volume_fraction)));
}

void supply_section(TextPage& page, const Report& r) {
  const auto& s = r.answer.supply;
  if (!s.per_hectolitre.asked) return;
  const auto each = [&](const Figure<Mass>& m) {
    return page.in_units(m, Dimension::mass, "kg", "/hL");
  };
  page.section("Gas and heat of the run");
  page.line("To dissolve", each(s.dissolved));
  if (s.headspace.asked) page.line("Into headspaces", each(s.headspace));
  if (s.purge.asked) page.line("To purge containers", each(s.purge));
  page.line("Together", each(s.per_hectolitre));
  page.line("Warming as it dissolves",
            shown(s.warming, unit("K", Dimension::temperature_difference)));
  if (!s.uncooled.asked) return;
  page.line("CO2 reached if not cooled",
            shown(s.uncooled_volumes, unit("vol", Dimension::gas_volumes)),
            page.in_units(s.uncooled, kContent, "g/L"));
}

}  // namespace capsigh::render_detail
