// Refusals in words.
#include <fmt/format.h>

#include "capsigh/answer/solve.hpp"
#include "capsigh/quantity/grammar.hpp"

namespace capsigh {
namespace {

std::string bar(double pascal) {
  return fmt::format("{} bar abs",
                     significant(in_unit(pascal, *find_unit("bar", Dimension::pressure)), 4));
}

std::string celsius(double kelvin) {
  return fmt::format("{} °C",
                     significant(in_unit(kelvin, *find_unit("°C", Dimension::temperature)), 4));
}

Finding refusal_finding(std::string code, std::string message, std::string expected) {
  Finding f;
  f.code = std::move(code);
  f.message = std::move(message);
  f.expected = std::move(expected);
  return f;
}

Finding explain_boiling(const Refusal& r) {
  if (r.value <= 0) {
    return refusal_finding("below-vacuum",
                           "a gauge reading that low lies below a vacuum at this ambient pressure",
                           "a reading above minus the ambient pressure");
  }
  const std::string_view where = r.asked_by == AskedBy::closing   ? "when the package is closed, "
                                 : r.asked_by == AskedBy::opening ? "when it is opened, "
                                                                  : "";
  return refusal_finding("boils",
                         fmt::format("{}at {} the liquid boils: its own vapour pressure is {}",
                                     where, bar(r.value), bar(r.bound)),
                         r.asked_by == AskedBy::contact ? "a higher pressure or a lower temperature"
                                                        : "a lower temperature");
}

}  // namespace

Finding explain(const Refusal& r) {
  switch (r.code) {
    case RefusalCode::boils: return explain_boiling(r);
    case RefusalCode::temperature_beyond_model:
      return refusal_finding(
          "temperature-beyond-model",
          fmt::format("{} is beyond what the laws of this liquid may be used for, which end at {}",
                      celsius(r.value), celsius(r.bound)),
          "a temperature between freezing and boiling");
    case RefusalCode::pressure_beyond_model:
      return refusal_finding(
          "pressure-beyond-model",
          fmt::format("a pressure of {} or more is beyond the gas law, which ends at {}",
                      bar(r.value), bar(r.bound)),
          "a lower pressure, content, temperature or fill");
    case RefusalCode::condenses:
      return refusal_finding("condenses",
                             fmt::format("CO2 would condense: its partial pressure {} is not "
                                         "below {}",
                                         bar(r.value), bar(r.bound)),
                             "a lower pressure or a warmer liquid");
    case RefusalCode::no_pressure_holds:
      return refusal_finding("no-pressure-holds",
                             fmt::format("no pressure up to {} dissolves that much", bar(r.bound)),
                             "a lower content, a colder liquid, or more of that gas in the "
                             "headspace");
    case RefusalCode::no_blend_holds:
      return refusal_finding(
          "no-blend-holds",
          r.value > 0 ? fmt::format("no blend holds that content at this temperature and pressure; "
                                    "the pure gas would at {}",
                                    bar(r.value))
                      : std::string("no blend holds that content at this temperature and pressure"),
          "a higher pressure, a colder liquid or a lower content");
    case RefusalCode::air_exceeds_headspace:
      return refusal_finding("air-exceeds-headspace", "the headspace has no room for that much air",
                             "less air, or a smaller fill");
    case RefusalCode::no_temperature_holds:
      return refusal_finding(
          "no-temperature-holds",
          fmt::format("even at {} the liquid holds less than that at this pressure",
                      celsius(r.bound)),
          "a higher pressure or a lower content");
    case RefusalCode::too_little_everywhere:
      return refusal_finding(
          "too-little-everywhere",
          fmt::format("up to {} the liquid holds more than that at this pressure",
                      celsius(r.bound)),
          "a lower pressure or a higher content");
    case RefusalCode::container_without_space:
      return refusal_finding("container-without-space",
                             "the liquid fills the whole container: no headspace is left and its "
                             "pressure has no upper bound",
                             "a smaller fill");
    case RefusalCode::nothing_of_that_gas:
      return refusal_finding("nothing-of-that-gas",
                             "a content is asked of a gas that the headspace does not hold",
                             "a share of that gas under [gas]");
    case RefusalCode::nothing_to_condition:
      return refusal_finding(
          "nothing-to-condition",
          fmt::format("no sugar is needed: before it ferments the liquid holds {} g/L already, and "
                      "{} g/L are wanted",
                      significant(r.value, 3), significant(r.bound, 3)),
          "a higher target, or a warmer residual");
    case RefusalCode::no_number: break;
  }
  return refusal_finding("no-number", "these inputs lead to no finite figure",
                         "values that can occur in a plant");
}

}  // namespace capsigh
