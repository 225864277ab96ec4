#include "capsigh/balance/shelf.hpp"

#include <cmath>

namespace capsigh {

std::optional<Duration> time_through_wall(double capacity_over_rate, double from, double to,
                                          double outside) {
  const double ratio = (from - outside) / (to - outside);
  if (!(ratio >= 1) || !std::isfinite(ratio)) return std::nullopt;
  return from_si<Duration>(capacity_over_rate * std::log(ratio));
}

ShelfCourse::ShelfCourse(const Medium& m, const AtTemperature& at, const Filling& filling,
                         const WallLeaks& leaks, const ClosedState& state)
    : m_(m), at_(at), leaks_(leaks), filling_(filling), state_(state) {
  // A gas that is to come in needs a share to have a capacity.
  constexpr double seed = 1e-12;
  double all = 0;
  for (const auto& n : filling_.amounts) all += n.value();
  bool seeded = false;
  for (const auto& l : leaks_) {
    auto& n = filling_.amounts[l.gas];
    if (n.value() > seed * all) continue;
    n = from_si<Amount>(seed * all);
    seeded = true;
  }
  if (!seeded) return;
  const auto found = equilibrium(m_, filling_, at_);
  if (refused(found) == nullptr) state_ = std::get<ClosedState>(found);
}

double ShelfCourse::capacity(const Filling& filling, const ClosedState& state, std::size_t gas) {
  const auto dry = state.pressure - state.at.vapour;
  return filling.amounts[gas].value() / (state.mixture.shares[gas] * dry).value();
}

// Every leaking gas of `filling` relaxed by that time, with the capacities of `state`.
void ShelfCourse::leak(Filling& filling, const ClosedState& state, double seconds) const {
  const Filling& start = filling_;
  for (const auto& l : leaks_) {
    // The capacity belongs to the state's own amounts, the relaxation starts from the step's.
    const double c = capacity(filling, state, l.gas);
    const double outside = c * l.outside.value();
    const double left = std::exp(-l.rate.value() * seconds / c);
    filling.amounts[l.gas] =
        from_si<Amount>(outside + (start.amounts[l.gas].value() - outside) * left);
  }
}

bool ShelfCourse::advance(Duration to) {
  const double step = (to - now_).value();
  Filling middle = filling_;
  leak(middle, state_, 0.5 * step);
  const auto half = equilibrium(m_, middle, at_, &state_);
  if (refused(half) != nullptr) return false;
  const auto& half_state = std::get<ClosedState>(half);
  Filling end = middle;
  middle_.clear();
  for (const auto& l : leaks_) middle_.push_back(capacity(middle, half_state, l.gas));
  leak(end, half_state, step);
  const auto whole = equilibrium(m_, end, at_, &half_state);
  if (refused(whole) != nullptr) return false;
  before_ = {now_, filling_.amounts, state_.contents};
  filling_ = end;
  state_ = std::get<ClosedState>(whole);
  now_ = to;
  return true;
}

// Within the last step a gas relaxed exponentially.
std::optional<Duration> ShelfCourse::when(std::size_t gas, double amount) const {
  for (std::size_t i = 0; i < leaks_.size(); ++i) {
    const auto& l = leaks_[i];
    if (l.gas != gas) continue;
    const double c = middle_[i];
    const double p_from = before_.amounts[gas].value() / c;
    const auto passed =
        time_through_wall(c / l.rate.value(), p_from, amount / c, l.outside.value());
    if (!passed) return std::nullopt;
    return before_.at + *passed;
  }
  return std::nullopt;
}

std::optional<Duration> ShelfCourse::when_amount(std::size_t gas, Amount limit) const {
  const auto passed = [&](Amount n) { return (n - limit).value(); };
  if (passed(before_.amounts[gas]) * passed(filling_.amounts[gas]) > 0) return std::nullopt;
  return when(gas, limit.value());
}

std::optional<Duration> ShelfCourse::when_content(std::size_t gas, Molality limit) const {
  const double from = before_.contents[gas].value();
  const double to = state_.contents[gas].value();
  if ((from - limit.value()) * (to - limit.value()) > 0 || from == to) return std::nullopt;
  // Content and amount go together almost in proportion.
  const double part = (limit.value() - from) / (to - from);
  const double n = before_.amounts[gas].value();
  return when(gas, n + part * (filling_.amounts[gas].value() - n));
}

}  // namespace capsigh
