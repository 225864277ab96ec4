// The solver behind solve(): one case at its current z. Split over several files: the contact and
// the opening, the closed package, and their traces.
#pragma once

#include <cmath>
#include <optional>
#include <string>

#include "capsigh/answer/solve.hpp"
#include "capsigh/balance/closed_container.hpp"
#include "capsigh/balance/contact.hpp"
#include "capsigh/balance/opened.hpp"
#include "capsigh/balance/shelf.hpp"
#include "capsigh/balance/supply.hpp"

namespace capsigh::answer_detail {

// The contact, solved.
struct ContactState {
  Pressure ambient{};
  Shares shares;
  AtTemperature at;
  GasMixture mixture;
  Pressure pressure{};
  Contents contents;
};

// A typical value as wide in doubt as itself, and never below zero: it is moved by a factor,
// q e^(d/q) for a shift of d, which to first order is the same.
template <class Q>
Q by_factor(const CitedConstant<Q>& typical, Trace* trace) {
  const Q best = typical.law.value;
  return best * std::exp(((typical.at(trace) - best) / best).value());
}

class Solver {
 public:
  Solver(const Case& c, Trace* trace)
      : c_(c),
        m_(c.medium),
        trace_(trace),
        liquid_(compose(c.medium.liquid, c.medium.content_temperature)) {}

  OrRefusal<Answer> run();

 private:
  using Maybe = std::optional<Refusal>;

  static Maybe by(AskedBy step, Maybe refusal);
  Maybe all_finite() const;
  Pressure ambient(Trace* trace) const;
  Pressure given_pressure(Trace* trace) const;
  MassDensity density_of_content(Trace* trace) const;
  Molality molality(const ContentCase& content) const;
  LiquidColumn column() const;
  Fraction approach() const;
  Pressure below(const AtTemperature& at, Pressure headspace, Trace* trace = nullptr) const;
  Contents taken_up(const AtTemperature& at, const GasMixture& mixture, Pressure headspace) const;
  OrRefusal<Pressure> headspace_for(std::size_t gas, Molality wanted) const;
  OrRefusal<Pressure> headspace_for_package(std::size_t gas, Molality wanted) const;
  OrRefusal<ClosedState> settled_package(const AtTemperature& closing_at,
                                         const AtTemperature& settled_at, Pressure headspace) const;
  OrRefusal<Pressure> pressure_for_target(std::size_t gas, Molality wanted) const;
  Maybe find_blend();
  double pressure_of_pure(const AtTemperature& at, const ContentCase& wish) const;
  Maybe solve_contact();
  void answer_contact();
  GasFigures gas_figures(std::size_t i, const Contents& contents, const GasMixture& mixture,
                         Pressure p, Pressure vapour) const;
  Molality trace_taken_up(Temperature t, Pressure headspace, std::size_t gas);
  void trace_contact();
  void trace_pressure(std::string figure, std::size_t gas, Pressure root);
  Maybe answer_saturation();
  Maybe saturation_of(const ContentCase& target);
  void trace_temperature(const SaturationFigures& s, std::size_t gas);
  Pressure closing_pressure() const;
  Shares headspace_at_closing(Fraction air) const;
  double z_over_air(const AtTemperature& at, Pressure p, Fraction air) const;
  Fraction share_of_air(const AtTemperature& at, Pressure p, Volume headspace) const;
  Contents at_closing(Contents reached) const;
  Temperature closing_temperature() const;
  OrRefusal<Closing> closing_with(const AtTemperature& at, const Contents& reached,
                                  std::optional<Volume> fill = std::nullopt) const;
  Compliance stretch() const;
  bool rated() const;
  Maybe answer_container();
  Maybe answer_at(Temperature t);
  Maybe answer_storage(Temperature t);
  void answer_closing();
  void answer_inverses();
  double room_to_rating(const ClosedState& state) const;
  void answer_safe_temperature();
  void answer_liquid_full();
  void answer_largest_fill();
  Temperature hottest() const;
  double room_for_fill(const AtTemperature& hottest, double fill) const;
  std::size_t oxygen() const;
  const ContentCase* limit_of(std::size_t gas) const;
  void answer_oxygen();
  Volume allowed_air(Trace* trace, const ContentCase& limit) const;
  WallLeaks leaks_at(const AtTemperature& at, Trace* trace) const;
  void answer_shelf();
  Pressure filled_partial(std::size_t gas) const;
  CoursePoint course_point(const ShelfCourse& course) const;
  void shelf_life(const ClosedState& state, ShelfLifeFigures& figures) const;
  static void first_limit(ShelfLifeFigures& figures);
  void trace_package();
  void trace_inverses();
  void trace_oxygen();
  void trace_shelf();
  Pressure margin(const ClosedState& state) const;
  ContainerFigures container_figures(const ClosedState& state) const;
  void trace_gauge(const ClosedState& state);
  Molality trace_state(const ClosedState& state);
  Maybe answer_opening();
  void answer_wine();
  void trace_wine(Pressure root);
  void trace_wine(const ClosedState& state);
  Mass litre() const;
  void answer_losses(const Opened& opened, std::size_t gas);
  void trace_losses(const Opened& opened, std::size_t gas, bool bubbles);

  // Conditioning: what was dissolved before, what the sugar adds (solve_conditioning.cpp).
  Shares pure_carbon_dioxide() const;
  OrRefusal<Molality> residual(Trace* trace) const;
  Fraction sugar_yield(Trace* trace) const;
  Fraction per_sugar(Trace* trace) const;
  Maybe prepare_conditioning();
  Maybe find_produced();
  OrRefusal<ClosedState> conditioned_package(Molality produced) const;
  MassConcentration per_litre(Molality b, std::size_t gas) const;
  Contents filled_with() const;
  Filling fermented(Filling filling) const;
  Maybe answer_conditioning();
  void trace_conditioning(const std::optional<ClosedState>& package);

  // The opened drink in time (solve_opened.cpp).
  bool present(std::size_t gas) const {
    return c_.in_container[gas] != 0 || c_.in_contact[gas] != 0;
  }
  Maybe answer_opened(const Opened& opened);
  void answer_shares(const Opened& opened);
  LossShare share_of(const Opened& opened, Mass loss) const;
  void answer_cold(const Opened& opened);
  void answer_bubbles(const Opened& opened, Molality saturated);
  Rate escape_rate(Trace* trace, const Opened& opened) const;
  Fraction after_pour(Trace* trace) const;
  Molality saturated(Trace* trace, const Opened& opened) const;
  void answer_escape(const Opened& opened, const Contents& flat, Molality saturated);
  void answer_moment(const Opened& opened, const Contents& flat, Duration after);
  Maybe answer_reclosed(const Opened& opened, const Contents& flat);
  void trace_reclosed(const ClosedState& state);

  // Gas and heat for a run (solve_supply.cpp).
  Molality incoming(std::size_t gas) const;
  Mass dissolved_in(std::size_t gas, Mass liquid, Trace* trace);
  Shares supplied_at_closing() const;
  Mass headspace_supply(Mass liquid) const;
  Mass purge_supply(Mass liquid, Trace* trace) const;
  TemperatureDifference warming(Temperature t, const Contents& reached, Trace* trace) const;
  void answer_uncooled();
  Maybe answer_supply();
  void trace_supply();

  const Case& c_;
  const Medium& m_;
  Trace* trace_;
  Liquid liquid_;
  Fraction found_{};  // share of the line that is solved for
  ContactState contact_;
  AtTemperature at_closing_;
  Closing closing_;
  Filling filling_;
  Molality residual_{};  // of CO2, before conditioning
  Molality produced_{};
  boost::container::static_vector<std::optional<ClosedState>, kMaxStorage> settled_;
  std::optional<ClosedState> closed_;        // the first of them
  std::optional<Refusal> unsettled_;         // why there is none
  std::optional<ClosedState> opened_state_;  // for the trace
  Answer answer_;
};

}  // namespace capsigh::answer_detail
