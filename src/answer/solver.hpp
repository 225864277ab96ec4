// The solver behind solve(): one case at its current z. Split over two files: the answers, and
// their traces.
#pragma once

#include <optional>
#include <string>

#include "capsigh/answer/solve.hpp"
#include "capsigh/balance/closed_container.hpp"
#include "capsigh/balance/contact.hpp"
#include "capsigh/balance/opening.hpp"

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
  OrRefusal<ClosedState> settled_package(Pressure headspace) const;
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
  Contents at_closing(Contents reached) const;
  OrRefusal<Closing> closing_with(const Contents& reached) const;
  Maybe answer_container();
  Pressure margin(const ClosedState& state) const;
  ContainerFigures container_figures(const ClosedState& state) const;
  void trace_container(const ClosedState& state);
  Molality trace_state(const ClosedState& state);
  Maybe answer_opening();
  Maybe answer_wine();
  void trace_wine(Pressure root);
  void trace_wine(const ClosedState& state);
  Mass litre() const;
  void answer_losses(const Opened& opened, std::size_t gas);
  void trace_losses(const Opened& opened, std::size_t gas, bool bubbles);

  const Case& c_;
  const Medium& m_;
  Trace* trace_;
  Liquid liquid_;
  Fraction found_{};  // share of the line that is solved for
  ContactState contact_;
  Filling filling_;
  std::optional<ClosedState> closed_;
  std::optional<ClosedState> opened_state_;  // for the trace
  Answer answer_;
};

}  // namespace capsigh::answer_detail
