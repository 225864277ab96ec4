// The operator's card as a page for the wall and as CSV.
#include <fmt/format.h>

#include "capsigh/answer/card.hpp"
#include "capsigh/quantity/grammar.hpp"
#include "capsigh/render/render.hpp"
#include "words.hpp"
#include "wrap.hpp"

namespace capsigh {
namespace {

using render_detail::padded;
using render_detail::printable;
using render_detail::wrapped;

constexpr std::size_t kColumn = 16;

std::string number(const std::optional<double>& value, int decimals) {
  // -0.0 is no mark of a gauge.
  return value ? fmt::format("{:.{}f}", *value == 0 ? 0.0 : *value, decimals) : "";
}

std::string centred(std::string_view text) {
  const std::size_t width = render_detail::columns(text);
  const std::size_t left = width < kColumn ? (kColumn - width) / 2 : 0;
  return padded(std::string(left, ' ') + std::string(text), kColumn);
}

std::string without_trailing_spaces(std::string line) {
  while (line.ends_with(' ')) line.pop_back();
  return line + "\n";
}

std::string rule_text(const Card& card) {
  constexpr double percent = 100;
  if (!card.rule.guarded) return "values are compared with the limits (simple acceptance)";
  if (!card.doubt_stated) return "no doubt of the instruments is stated: values are compared";
  return fmt::format("guarded: at these readings the content is inside with at least {} %",
                     significant(percent * (1.0 - card.rule.risk), 3));
}

std::string window(const Card& card, const CardRow& row) {
  if (row.refused) return "no answer outside the range of the laws";
  if (row.empty) return "nothing is accepted: instruments too coarse";
  if (row.between_marks) return "what is allowed lies between two marks of the gauge";
  const std::string any = "-";
  const auto or_any = [&](const std::optional<double>& v) {
    return v ? number(v, card.decimals) : any;
  };
  std::string text = centred(or_any(row.lowest));
  if (row.target) text += centred(number(row.target, card.decimals));
  return text + centred(or_any(row.highest));
}

bool has_target(const Card& card) {
  for (const auto& row : card.rows) {
    if (row.target) return true;
  }
  return false;
}

std::string notes(const Card& card) {
  const std::vector<const Unit*> asked{card.pressure, card.temperature};
  std::string out;
  const auto section = [&](std::string_view name) { out += fmt::format("\n{}\n", name); };
  if (card.advice.by != Advice::By::nothing) {
    section("To open the window");
    out += wrapped("  ", render_detail::advice_text(card.advice, "open it", asked));
  }
  if (!card.cautions.empty()) {
    section("Caution");
    for (const auto& f : card.cautions) out += wrapped("  ! ", printable(f.message));
  }
  section("Assumed (sources: capsigh report, capsigh constants)");
  if (!card.doubt_not_stated.empty()) {
    out += wrapped("  - ", fmt::format("doubt not stated, counted as exact: {}",
                                       fmt::join(card.doubt_not_stated, ", ")));
  }
  for (const auto& f : card.assumptions) out += wrapped("  - ", printable(f.message));
  out += fmt::format("\ncapsigh {}, recipe {}\nconstants {}\n", card.audit.version,
                     card.audit.recipe_digest, card.audit.constants_digest);
  return out;
}

}  // namespace

std::string text_card(const Card& card) {
  const auto hectopascal = *find_unit("hPa", Dimension::pressure);
  std::string out = card.title.empty() ? "Gauge card\n" : printable(card.title) + "\n";
  for (const auto& [key, text] : card.about) {
    out += wrapped("  " + printable(key) + ": ", printable(text));
  }
  const std::string basis =
      card.relation == "composition" ? "true, by composition" : "as tested, by " + card.relation;
  out += wrapped(
      "  ", fmt::format("{} {} in {}, {}", card.gas, printable(card.wish), card.liquid, basis));
  out += wrapped("  ", fmt::format("gauge against ambient {:.1f} hPa",
                                   in_unit(card.ambient.value(), hectopascal)));
  out += wrapped("  ", rule_text(card));
  for (const auto& [key, text] : card.instruments) {
    out += wrapped("  " + printable(key) + ": ", printable(text));
  }
  const bool target = has_target(card);
  const std::string first =
      padded(fmt::format("  Thermometer {}", card.temperature->text), kColumn + 8);
  out += "\n" + without_trailing_spaces(
                    first + fmt::format("Gauge {}, after shaking", card.pressure->text));
  out += without_trailing_spaces(padded("", kColumn + 8) + centred("lowest") +
                                 (target ? centred("target") : "") + centred("highest"));
  for (const auto& row : card.rows) {
    out += without_trailing_spaces(
        padded(fmt::format("  {:>11}", number(row.shown, card.temperature_decimals)), kColumn + 8) +
        window(card, row));
  }
  return out + notes(card);
}

std::string csv_card(const Card& card) {
  std::string out = fmt::format(
      "temperature [{}],lowest [{} gauge],target [{} gauge],highest [{} gauge],note\n",
      card.temperature->text, card.pressure->text, card.pressure->text, card.pressure->text);
  for (const auto& row : card.rows) {
    const std::string note = row.refused         ? "outside the range of the laws"
                             : row.empty         ? "instruments too coarse"
                             : row.between_marks ? "between two marks"
                                                 : "";
    const bool shown = note.empty();
    const auto cell = [&](const std::optional<double>& v) {
      return shown ? number(v, card.decimals) : "";
    };
    out += fmt::format("{},{},{},{},{}\n", number(row.shown, card.temperature_decimals),
                       cell(row.lowest), cell(row.target), cell(row.highest), note);
  }
  return out;
}

}  // namespace capsigh
