// The one wrapper that joins a formula to its record, its doubt and the trace.
#pragma once

#include <array>
#include <string_view>
#include <utility>

#include "capsigh/constants/record.hpp"
#include "capsigh/constants/trace.hpp"
#include "capsigh/quantity/units.hpp"

namespace capsigh {

/// What a formula calls itself and its symbols. Every law has `static constexpr LawInfo<N> info`,
/// N the number of its arguments.
template <std::size_t N>
struct LawInfo {
  std::string_view name;
  std::string_view equation;
  std::array<std::string_view, N> inputs;
  std::string_view result;
};

namespace detail {

template <class In>
void note_condition(Conditions& c, const In& in) {
  if constexpr (std::is_same_v<In, Temperature>) c.temperature = in;
  if constexpr (std::is_same_v<In, Pressure>) c.pressure = in;
}

template <class Law, class Out, class... In, std::size_t... I>
void note_step(Trace& trace, const Record* record, const Out& out, std::index_sequence<I...>,
               const In&... in) {
  TraceStep step;
  step.law = Law::info.name;
  step.equation = Law::info.equation;
  step.record = record;
  (step.inputs.push_back({Law::info.inputs[I], si_value(in), si_symbol<In>}), ...);
  step.result = {Law::info.result, si_value(out), si_symbol<Out>};
  (note_condition(step.conditions, in), ...);
  trace.note(std::move(step));
}

}  // namespace detail

/// Evaluates a formula that rests on no record (an identity or a definition) and notes it.
template <class Law, class... In>
auto apply(Trace* trace, const Law& law, const In&... in) {
  const auto out = law(in...);
  if (trace != nullptr) {
    detail::note_step<Law>(*trace, nullptr, out, std::index_sequence_for<In...>{}, in...);
  }
  return out;
}

/// Evaluates a formula that follows a definition (a record without doubt) and notes it. The range
/// of the definition is judged at `at`.
template <class Law, class... In>
auto apply_defined(Trace* trace, const Record* definition, const Conditions& at, const Law& law,
                   const In&... in) {
  const auto out = apply(trace, law, in...);
  if (trace != nullptr) {
    trace->chains.back().steps.back().definition = definition;
    trace->chains.back().steps.back().conditions = at;
  }
  return out;
}

/// The doubt of one record: z standard uncertainties away from what is printed. Outside its range
/// `widening` enlarges u. Relative where the result keeps its sign, absolute (SI) where it may
/// cross zero.
struct RecordDoubt {
  const Record* record = nullptr;
  double u = 0;
  bool is_absolute = false;
  double widening = 1;
  double z = 0;

  template <class Q>
  [[nodiscard]] Q shift(const Q& q) const {
    const double shift = u * widening * z;
    if (is_absolute) return q + from_si<Difference<Q>>(shift);
    return q * (1.0 + shift);
  }
};

RecordDoubt doubt_of(const Record& record);

/// Evaluates a formula under a record's doubt and notes it.
template <class Law, class... In>
auto apply(Trace* trace, const RecordDoubt& doubt, const Law& law, const In&... in) {
  const auto out = doubt.shift(law(in...));
  if (trace != nullptr) {
    detail::note_step<Law>(*trace, doubt.record, out, std::index_sequence_for<In...>{}, in...);
  }
  return out;
}

/// A formula with the record behind it.
template <class Law>
struct Cited {
  Law law;
  RecordDoubt doubt;

  /// law(in...) moved by the record's doubt; notes itself if there is a trace.
  template <class... In>
  auto at(Trace* trace, const In&... in) const {
    return apply(trace, doubt, law, in...);
  }
};

/// A record that is one number.
template <class Q>
struct Constant {
  Q value{};
  static constexpr LawInfo<0> info{"constant of its record", "value as printed", {}, "value"};
  Q operator()() const { return value; }
};

template <class Q>
using CitedConstant = Cited<Constant<Q>>;

}  // namespace capsigh
