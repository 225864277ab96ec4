// How fast an open drink goes flat: relaxation to equilibrium with the air of the room.
//
//   b(t) = b_air + (b_0 − b_air) s exp(−λ t)
//
// First order in what is left to lose, λ from a measured half-life, or k_L A/V. Bubbles make the
// beginning faster than any one rate says; a measured half-life holds for the stretch in which it
// was measured.
#pragma once

#include <algorithm>
#include <cmath>

#include "capsigh/constants/cited.hpp"
#include "capsigh/quantity/thermal.hpp"

namespace capsigh {

/// λ = ln 2/t_half.
struct RateOfHalfLife {
  static constexpr LawInfo<1> info{"rate of escape", "lambda = ln 2/t_half", {"t_half"}, "lambda"};
  Rate operator()(Duration half_life) const { return std::log(2.0) / half_life; }
};

/// k_L of a kind of surface, doubted by a factor, not by a difference: orders of magnitude are what
/// is in doubt, and no coefficient is below zero.
struct TransferOfSurface {
  Velocity typical{};
  Fraction factor{};
  static constexpr LawInfo<0> info{
      "transfer coefficient of the surface", "k_L of its record", {}, "k_L"};
  Velocity operator()() const { return typical * factor; }
};

/// λ = k_L A/V. Worked value: 2e-5 m/s, 20 cm², 330 mL: 1.21e-4 1/s, a half-life of
/// 95 min.
struct RateOfSurface {
  static constexpr LawInfo<3> info{
      "rate of escape", "lambda = k_L A/V", {"k_L", "A", "V"}, "lambda"};
  Rate operator()(Velocity transfer, Area surface, Volume liquid) const {
    return transfer * surface / liquid;
  }
};

/// t_half = ln 2/λ; λ must be above zero.
struct HalfLifeOfRate {
  static constexpr LawInfo<1> info{
      "half-life of escape", "t_half = ln 2/lambda", {"lambda"}, "t_half"};
  Duration operator()(Rate rate) const { return std::log(2.0) / rate; }
};

/// What is left to lose after a time: f = s exp(−λ t), s after pouring (1 where nothing is poured).
struct LeftToLose {
  static constexpr LawInfo<3> info{
      "share that is left to lose", "f = s exp(-lambda t)", {"s", "lambda", "t"}, "f"};
  Fraction operator()(Fraction after_pour, Rate rate, Duration t) const {
    return after_pour * std::exp(-(rate * t).value());
  }
};

/// s = 1 − share lost in pouring, not below zero.
struct LeftAfterPour {
  static constexpr LawInfo<1> info{"share left after pouring", "s = max(1 - a, 0)", {"a"}, "s"};
  Fraction operator()(Fraction lost) const { return std::max(Fraction(1.0) - lost, Fraction(0.0)); }
};

/// b = b_air + f (b_0 − b_air).
struct ContentInTime {
  static constexpr LawInfo<3> info{
      "content of the open drink", "b = b_air + f (b0 - b_air)", {"b0", "b_air", "f"}, "b"};
  Molality operator()(Molality at_first, Molality with_air, Fraction left) const {
    return with_air + left * (at_first - with_air);
  }
};

/// Lost since opening: m = m_head + (1 − f)(m_fizz + m_flat). In the end, all three.
struct LostInTime {
  static constexpr LawInfo<4> info{"lost since opening",
                                   "m = m_head + (1 - f)(m_fizz + m_flat)",
                                   {"m_head", "m_fizz", "m_flat", "f"},
                                   "m"};
  Mass operator()(Mass headspace, Mass fizz, Mass flat, Fraction left) const {
    return headspace + (Fraction(1.0) - left) * (fizz + flat);
  }
};

/// When the last bubble has risen: f (b_0 − b_air) = b_eq − b_air. Only where b_0 s > b_eq.
struct TimeOfFizz {
  static constexpr LawInfo<5> info{"time until no bubbles rise",
                                   "t = ln(s (b0 - b_air)/(b_eq - b_air))/lambda",
                                   {"s", "b0", "b_eq", "b_air", "lambda"},
                                   "t"};
  Duration operator()(Fraction after_pour, Molality at_first, Molality equilibrium,
                      Molality with_air, Rate rate) const {
    const double ratio =
        after_pour.value() * (at_first - with_air).value() / (equilibrium - with_air).value();
    return std::log(ratio) / rate;
  }
};

}  // namespace capsigh
