// What a case knows of the container: filling and closing, storage, wall and limits.
#pragma once

#include <boost/container/static_vector.hpp>
#include <optional>

#include "capsigh/answer/content_case.hpp"
#include "capsigh/balance/medium.hpp"
#include "capsigh/models/permeation.hpp"
#include "capsigh/quantity/uncertain.hpp"
#include "capsigh/recipe/recipe.hpp"

namespace capsigh {

inline constexpr std::size_t kMaxStorage = 12;
inline constexpr std::size_t kMaxCourse = 8;  ///< points of a course that are shown
inline constexpr std::size_t kMaxMarch = 16;  ///< times a course is followed to

/// How one gas passes the wall: so much under a reference difference of partial pressure.
struct WallCase {
  std::size_t gas = 0;
  std::optional<Uncertain<Transmission>> stated;  ///< else typical of the kind
  CitedConstant<Transmission> typical;
  /// Stated of CO2: the difference is that of the package itself as filled, at the reference
  /// temperature. Otherwise `difference`.
  bool as_filled = false;
  Pressure difference{};
};

struct ShelfCase {
  boost::container::static_vector<WallCase, 2> wall;
  CitedConstant<MolarEnergy> activation;
  Temperature reference;
  /// Times the course is followed to, the first `shown` of them reported.
  boost::container::static_vector<Duration, kMaxMarch> times;
  std::size_t shown = 0;
};

struct ContainerCase {
  Uncertain<Volume> brimful;
  std::optional<Uncertain<Volume>> fill;  ///< carbonated liquid at closing, or ...
  std::optional<Uncertain<Mass>> fill_mass;
  std::optional<Uncertain<Temperature>> closing_temperature;  ///< else the contact's
  std::optional<Uncertain<Pressure>> closing_absolute;        ///< else by the gauge:
  Uncertain<GaugePressure> closing_gauge;
  Uncertain<Fraction> closing_air;                      ///< of the dry headspace, or ...
  std::optional<Uncertain<Volume>> closing_air_volume;  ///< at closing temperature and ambient
  std::optional<ContentCase> closing_oxygen;            ///< dissolved at closing
  PerGas<ContentCase> filling_loss;
  std::optional<Uncertain<Mass>> nitrogen_dose;
  std::optional<Uncertain<Compliance>> stretch;              ///< else ...
  std::optional<CitedConstant<Compliance>> typical_stretch;  ///< ... of its kind; neither: rigid
  boost::container::static_vector<Uncertain<Temperature>, kMaxStorage> storage;
  std::optional<Fraction> minimum_ullage;
  PerGas<ContentCase> limits;  ///< of CO2 a least content, of O2 the most in the package
  std::optional<ShelfCase> shelf;
  std::optional<GaugePressure> rated_gauge;
  std::optional<Pressure> rated_absolute;
};

}  // namespace capsigh
