// How long the package keeps: gases through its wall until a limit is reached.
#include <algorithm>

#include "solver.hpp"

namespace capsigh::answer_detail {

// What passes the wall at the temperature of `at`.
WallLeaks Solver::leaks_at(const AtTemperature& at, Trace* trace) const {
  const auto& shelf = *c_.container->shelf;
  WallLeaks leaks;
  for (const auto& wall : shelf.wall) {
    const Pressure outside = c_.air[wall.gas] * contact_.ambient;
    Pressure difference = wall.difference;
    if (wall.as_filled) difference = filled_partial(wall.gas) - outside;
    if (!(difference.value() > 0)) continue;
    const auto reference = wall.stated ? wall.stated->now() : by_factor(wall.typical, trace);
    const auto q = apply(trace, TransmissionAt{m_.r}, reference, shelf.activation.at(trace), at.t,
                         shelf.reference);
    const auto rate =
        apply(trace, RateThroughWall{}, q, difference, volume_basis(m_, wall.gas, false, trace));
    if (rate.value() > 0) leaks.push_back({wall.gas, rate, outside});
  }
  return leaks;
}

// Partial pressure of a gas in the package as filled, at the reference temperature of the wall.
Pressure Solver::filled_partial(std::size_t gas) const {
  const auto found = equilibrium(m_, liquid_, filling_, c_.container->shelf->reference);
  if (refused(found) != nullptr) return {};
  const auto& state = std::get<ClosedState>(found);
  return state.mixture.shares[gas] * (state.pressure - state.at.vapour);
}

void Solver::answer_shelf() {
  if (!c_.container->shelf) return;
  for (const auto& state : settled_) {
    ShelfLifeFigures figures;
    figures.course.resize(c_.container->shelf->shown);  // slots keep their places
    if (state) shelf_life(*state, figures);
    answer_.package.shelf_life.push_back(figures);
  }
  for (std::size_t i = 0; i < settled_.size(); ++i) {
    answer_.package.shelf_life[i].temperature = answer_.package.at[i].temperature.value;
  }
}

// One point of the course.
CoursePoint Solver::course_point(const ShelfCourse& course) const {
  const auto& state = course.state();
  CoursePoint point;
  point.after = course.now();
  point.pressure_gauge = gauge(state.pressure, contact_.ambient);
  if (m_.co2 < m_.size()) {
    const auto g =
        gas_figures(m_.co2, state.contents, state.mixture, state.pressure, state.at.vapour);
    point.volumes = g.volumes.value;
    point.mass_concentration = g.mass_concentration.value;
  }
  if (oxygen() < m_.size()) {
    const auto& filling = course.filling();
    point.oxygen = filling.amounts[oxygen()] * m_.gases[oxygen()].molar_mass.at(nullptr) /
                   (filling.liquid / liquid_.density);
  }
  return point;
}

void Solver::shelf_life(const ClosedState& state, ShelfLifeFigures& figures) const {
  const auto& shelf = *c_.container->shelf;
  const auto leaks = leaks_at(state.at, nullptr);
  const auto* least = limit_of(m_.co2);
  const auto* most = limit_of(oxygen());
  if (least != nullptr && state.contents[m_.co2] <= molality(*least)) {
    figures.until_co2 = Duration{};
  }
  if (most != nullptr && filling_.amounts[oxygen()] >= molality(*most) * filling_.liquid) {
    figures.until_o2 = Duration{};
  }
  ShelfCourse course(m_, state.at, filling_, leaks, state);
  for (std::size_t i = 0; i < shelf.times.size(); ++i) {
    const bool known = (least == nullptr || figures.until_co2.asked) &&
                       (most == nullptr || figures.until_o2.asked);
    if (i >= shelf.shown && known) break;
    if (!course.advance(shelf.times[i])) break;
    if (i < shelf.shown) figures.course[i] = course_point(course);
    if (least != nullptr && !figures.until_co2.asked) {
      if (const auto when = course.when_content(m_.co2, molality(*least)))
        figures.until_co2 = *when;
    }
    if (most != nullptr && !figures.until_o2.asked) {
      const auto amount = molality(*most) * filling_.liquid;
      if (const auto when = course.when_amount(oxygen(), amount)) figures.until_o2 = *when;
    }
  }
  first_limit(figures);
}

// Which of the limits is reached first.
void Solver::first_limit(ShelfLifeFigures& figures) {
  const auto& co2 = figures.until_co2;
  const auto& o2 = figures.until_o2;
  if (co2.asked && (!o2.asked || co2.value <= o2.value)) {
    figures.until_limit = co2.value;
    figures.gas = "CO2";
  } else if (o2.asked) {
    figures.until_limit = o2.value;
    figures.gas = "O2";
  }
}

}  // namespace capsigh::answer_detail
