#include "caution_life.hpp"

#include <fmt/format.h>

#include "capsigh/quantity/grammar.hpp"

namespace capsigh::answer_detail {
namespace {

void caution(Report& report, std::string code, std::string message) {
  Finding f;
  f.severity = Severity::caution;
  f.code = std::move(code);
  f.message = std::move(message);
  report.cautions.push_back(std::move(f));
}

void caution_cold(Report& report) {
  const auto& opened = report.answer.opened;
  if (!opened.dry_ice.asked || opened.dry_ice.value.value() < 1) return;
  const double celsius =
      in_unit(opened.cold_gas.value.kelvin(), *find_unit("°C", Dimension::temperature));
  caution(
      report, "dry-ice",
      fmt::format("opened all at once, the gas in the headspace can fall to {} °C, where CO2 "
                  "freezes to dry ice: it can block a narrow vent, and burns skin; closures fly, "
                  "keep the face away",
                  significant(celsius, 2)));
}

void caution_conditioning(const Library& library, Report& report) {
  caution(report, "bottle-conditioning",
          "glass can burst when more ferments than was meant: weigh the sugar, mix it evenly, and "
          "count the fermentable sugar that is left in the liquid (4 g/L bring about 1 vol); the "
          "bottle maker's rating at the warmest it will get decides");
  const Record& ordinary = library.at("assumed.ordinary_bottle");
  for (const auto& g : report.answer.gases) {
    const double vol = g.volumes.value.value();
    if (g.gas != "CO2" || vol <= ordinary.values[0].value) continue;
    caution(report, "overpriming",
            fmt::format("{} vol are more than ordinary glass bottles are used for (about {} vol): "
                        "only bottles made for sparkling wine, or the maker's word",
                        significant(vol, 3), ordinary.values[0].digits));
  }
}

void caution_supply(const Case& c, Report& report) {
  const auto& supply = report.answer.supply;
  if (supply.dissolved.value.value() <= 0) {
    caution(
        report, "incoming-holds-more",
        "the incoming liquid holds as much gas as the contact or more: none dissolves, and what "
        "is too much comes out");
  }
  if (c.supply->purge) {
    caution(report, "purge-in-room",
            "purge gas ends in the room and displaces air: ventilate, and watch CO2 and oxygen by "
            "local rules");
  }
}

}  // namespace

void caution_life(const Binding& binding, const Library& library, Report& report) {
  const Case& c = binding.problem;
  if (c.opening) caution_cold(report);
  if (c.conditioning) caution_conditioning(library, report);
  if (c.supply) caution_supply(c, report);
}

}  // namespace capsigh::answer_detail
