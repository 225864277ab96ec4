// A closed package on the shelf: gases pass its wall, the rest stays in equilibrium.
//
//   dn_i/dt = −w_i (p_i − p_i,out)
//
// The wall is slow against the exchange between liquid and headspace, so that the package is at
// equilibrium all the time. With the capacity C_i = n_i/p_i, which hardly changes, each gas relaxes
// exponentially towards the room; steps are taken with the capacity of the middle of the step
// (exponential midpoint, second order). Check: a capacity that does not change gives the closed
// form n_out + (n − n_out) exp(−w t/C).
#pragma once

#include <boost/container/static_vector.hpp>

#include "capsigh/balance/closed_container.hpp"
#include "capsigh/models/permeation.hpp"

namespace capsigh {

/// One gas that passes the wall.
struct WallLeak {
  std::size_t gas = 0;
  LeakRate rate{};     ///< at the storage temperature
  Pressure outside{};  ///< its partial pressure in the room
};
inline constexpr std::size_t kMaxLeaks = 2;
using WallLeaks = boost::container::static_vector<WallLeak, kMaxLeaks>;

/// t = (C/w) ln((p_0 − p_out)/(p − p_out)) from `from` to `to` partial pressures; nullopt where the
/// gas moves the other way or never gets there.
std::optional<Duration> time_through_wall(double capacity_over_rate, double from, double to,
                                          double outside);

/// The course of a package at one temperature, followed in steps.
class ShelfCourse {
 public:
  /// Starts from `filling`, whose equilibrium at `at` is `state`; all of them outlive the course.
  ShelfCourse(const Medium& medium, const AtTemperature& at, const Filling& filling,
              const WallLeaks& leaks, const ClosedState& state);

  /// Follows the package to a later time; false where it has no state there.
  bool advance(Duration to);

  [[nodiscard]] Duration now() const { return now_; }
  [[nodiscard]] const ClosedState& state() const { return state_; }
  [[nodiscard]] const Filling& filling() const { return filling_; }

  /// When the content of `gas` in the liquid passed `limit` on the last step; nullopt: not there.
  [[nodiscard]] std::optional<Duration> when_content(std::size_t gas, Molality limit) const;
  /// When its amount in the package did.
  [[nodiscard]] std::optional<Duration> when_amount(std::size_t gas, Amount limit) const;

 private:
  struct Before {
    Duration at{};
    PerGas<Amount> amounts;
    Contents contents;
  };
  [[nodiscard]] std::optional<Duration> when(std::size_t gas, double amount) const;
  static double capacity(const Filling& filling, const ClosedState& state, std::size_t gas);
  void leak(Filling& filling, const ClosedState& state, double seconds) const;

  const Medium& m_;
  const AtTemperature& at_;
  const WallLeaks& leaks_;
  Filling filling_;
  ClosedState state_;
  Duration now_{};
  Before before_;
  boost::container::static_vector<double, kMaxLeaks> middle_;  // capacities, mol/Pa
};

}  // namespace capsigh
