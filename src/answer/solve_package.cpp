// What is asked of a closed package the other way round, and its oxygen.
#include <algorithm>
#include <cmath>
#include <limits>

#include "capsigh/balance/bracketing.hpp"
#include "solver.hpp"

namespace capsigh::answer_detail {
namespace {

constexpr double kNone = std::numeric_limits<double>::quiet_NaN();
constexpr double kTooMuch = -1;  // of a bracketed search: beyond what is allowed

}  // namespace

// What a gauge reads on the line once the package has settled there.
void Solver::answer_closing() {
  const auto found = equilibrium(m_, filling_, at_closing_);
  if (refused(found) != nullptr) return;
  answer_.package.closing_temperature = closing_.temperature;
  answer_.package.closing_gauge = gauge(std::get<ClosedState>(found).pressure, contact_.ambient);
}

void Solver::answer_inverses() {
  if (rated()) answer_safe_temperature();
  answer_liquid_full();
  if (c_.container->minimum_ullage) answer_largest_fill();
}

// ln(allowed/present pressure): above zero below the rating.
double Solver::room_to_rating(const ClosedState& state) const {
  return std::log((state.pressure + margin(state)) / state.pressure);
}

// The temperature at which the rating is reached, or the package is full of liquid before. Not
// asked where it is above its rating at every temperature, or below it.
void Solver::answer_safe_temperature() {
  const auto room = [&](double kelvin, double without) {
    const auto found = equilibrium(m_, liquid_, filling_, from_si<Temperature>(kelvin));
    return refused(found) != nullptr ? without : room_to_rating(std::get<ClosedState>(found));
  };
  const auto& search = m_.temperature_search;
  const double start = closed_ ? closed_->at.t.kelvin() : closing_.temperature.kelvin();
  constexpr double nearby = 10;  // K
  auto root = root_near([&](double kelvin) { return room(kelvin, kNone); }, start, start + nearby,
                        search.low, search.high);
  if (!root) {
    root = root_between([&](double kelvin) { return room(kelvin, kTooMuch); }, search.low,
                        search.high);
  }
  if (root) answer_.package.safe_temperature = from_si<Temperature>(*root);
}

// Looked for only where a storage temperature is beyond it.
void Solver::answer_liquid_full() {
  const auto& states = answer_.package.at;
  const bool full = std::any_of(states.begin(), states.end(), [](const ContainerFigures& f) {
    return f.without_state == RefusalCode::container_without_space;
  });
  if (!full) return;
  const auto& search = m_.temperature_search;
  const auto found = liquid_full_temperature(
      m_, liquid_, filling_, from_si<Temperature>(search.low), from_si<Temperature>(search.high));
  if (found) answer_.package.liquid_full = *found;
}

Temperature Solver::hottest() const {
  if (c_.container->storage.empty()) return closing_.temperature;
  Temperature hottest = c_.container->storage.front().now();
  for (const auto& t : c_.container->storage) hottest = std::max(hottest, t.now());
  return hottest;
}

// Above zero where a fill, m³, keeps the ullage and the rating; NaN where nothing can be filled.
double Solver::room_for_fill(const AtTemperature& hottest, double fill) const {
  const auto closing = closing_with(at_closing_, filled_with(), from_si<Volume>(fill));
  if (refused(closing) != nullptr) return kNone;
  const auto& closed = std::get<Closing>(closing);
  const auto found = equilibrium(m_, fermented(close(m_, at_closing_, closed)), hottest);
  if (refused(found) != nullptr) return kNone;
  const auto& state = std::get<ClosedState>(found);
  const Fraction ullage = state.headspace / closed.shell.brimful;
  const double room = (ullage - *c_.container->minimum_ullage).value();
  return rated() ? std::min(room, room_to_rating(state)) : room;
}

// Carbonated liquid at closing. Not asked where even a hundredth of the container is too much.
void Solver::answer_largest_fill() {
  const Temperature warmest = hottest();
  if (!m_.temperature_search.contains(warmest.kelvin())) return;
  const auto at = at_temperature(m_, liquid_, warmest);
  const double brimful = closing_.shell.brimful.value();
  const double given = liquid_volume(m_, at_closing_, closing_).value();
  constexpr double least = 0.01;
  constexpr double nearby = 0.99;
  auto root = root_near([&](double fill) { return room_for_fill(at, fill); }, given, nearby * given,
                        least * brimful, brimful);
  if (!root) {
    root = root_between(
        [&](double fill) {
          const double room = room_for_fill(at, fill);
          return std::isnan(room) ? kTooMuch : room;
        },
        least * brimful, brimful);
  }
  if (root) answer_.package.largest_fill = from_si<Volume>(*root);
}

// The place of oxygen among the gases of the package; size() where it has none.
std::size_t Solver::oxygen() const {
  for (std::size_t i = 0; i < m_.size(); ++i) {
    if (m_.gases[i].name == "O2" && c_.in_container[i] != 0) return i;
  }
  return m_.size();
}

const ContentCase* Solver::limit_of(std::size_t gas) const {
  const auto& limits = c_.container->limits;
  const auto it = std::find_if(limits.begin(), limits.end(),
                               [&](const ContentCase& l) { return l.gas == gas; });
  return it == limits.end() ? nullptr : &*it;
}

void Solver::answer_oxygen() {
  const auto gas = oxygen();
  if (gas >= m_.size()) return;
  auto& figures = answer_.package.oxygen;
  const auto molar_mass = m_.gases[gas].molar_mass.at(nullptr);
  const auto litres = filling_.liquid / liquid_.density;
  figures.total = filling_.amounts[gas] * molar_mass / litres;
  figures.per_package = filling_.amounts[gas] * molar_mass;
  if (closed_) {
    const Amount dissolved = closed_->contents[gas] * filling_.liquid;
    figures.dissolved = dissolved * molar_mass / litres;
    figures.headspace = (filling_.amounts[gas] - dissolved) * molar_mass / litres;
  }
  if (const auto* limit = limit_of(gas)) {
    figures.limit = molality(*limit) * liquid_.density * molar_mass;
    figures.allowed_air = allowed_air(nullptr, *limit);
  }
}

// Air in the headspace at closing, at closing temperature and ambient, that brings the oxygen of
// the package to its limit: none, up to a headspace full of it.
Volume Solver::allowed_air(Trace* trace, const ContentCase& limit) const {
  const auto gas = limit.gas;
  const Amount more = (molality(limit) - closing_.contents[gas]) * filling_.liquid;
  ClosedState head;
  head.at = at_closing_;
  head.headspace = stretched(nullptr, closing_.shell, closing_.pressure) -
                   liquid_volume(m_, at_closing_, closing_);
  const double from_gas = contact_.shares[gas].value();
  const double from_air = c_.air[gas].value();
  double share = 0;
  constexpr int rounds = 6;  // the share enters its own gas law by half a percent
  for (int i = 0; i < rounds; ++i) {
    head.mixture = mix(m_, at_closing_, headspace_at_closing(Fraction(share)));
    const Amount dry =
        gas_in_headspace(i + 1 == rounds ? trace : nullptr, m_, head, closing_.pressure);
    share = std::clamp(((more / dry).value() - from_gas) / (from_air - from_gas), 0.0, 1.0);
  }
  const double z = z_over_air(at_closing_, closing_.pressure, Fraction(share));
  return share / z * ((closing_.pressure - at_closing_.vapour) / contact_.ambient).value() *
         head.headspace;
}

}  // namespace capsigh::answer_detail
