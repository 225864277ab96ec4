#include "capsigh/answer/case.hpp"

#include <algorithm>

namespace capsigh {
namespace {

class DoubtList {
 public:
  template <class Q>
  void input(const std::string& name, Uncertain<Q>& input,
             std::string_view unit = si_symbol<Difference<Q>>) {
    const double u = si_value(input.u);
    if (!(u > 0)) return;
    list_.push_back({name, &input.z, u, std::string(unit), input.shape, false});
  }

  template <class Q>
  void input(const std::string& name, std::optional<Uncertain<Q>>& maybe) {
    if (maybe) input(name, *maybe);
  }

  void record(RecordDoubt& doubt) {
    if (doubt.record == nullptr || !(doubt.u > 0)) return;
    const auto& printed = doubt.record->uncertainty.printed;
    const auto unit = printed.substr(std::min(printed.find(' ') + 1, printed.size()));
    const double scale = doubt.u / std::stod(std::string(printed));
    list_.push_back({std::string(doubt.record->key), &doubt.z, doubt.u * doubt.widening / scale,
                     std::string(unit), Shape::normal, true});
  }

  std::vector<Doubt> take() { return std::move(list_); }

 private:
  std::vector<Doubt> list_;
};

std::string_view unit_of(ContentMeasure measure) {
  switch (measure) {
    case ContentMeasure::mass_concentration: return "kg/m3";
    case ContentMeasure::amount_concentration: return "mol/m3";
    case ContentMeasure::molality: return "mol/kg";
    case ContentMeasure::volumes:
    case ContentMeasure::mass_fraction: break;
  }
  return "1";
}

// Storage and wall.
void package_doubts(DoubtList& list, Case& c) {
  auto& container = *c.container;
  list.input("container.stretch", container.stretch);
  if (container.typical_stretch) list.record(container.typical_stretch->doubt);
  for (std::size_t i = 0; i < container.storage.size(); ++i) {
    list.input("container.storage[" + std::to_string(i) + "]", container.storage[i]);
  }
  if (!container.shelf) return;
  for (auto& wall : container.shelf->wall) {
    list.input("container.wall." + std::string(c.medium.gases[wall.gas].name), wall.stated);
    list.record(wall.typical.doubt);
  }
  list.record(container.shelf->activation.doubt);
}

void opening_inputs(DoubtList& list, OpeningCase& opening) {
  list.input("opening.temperature", opening.temperature);
  if (opening.escape) {
    list.input("opening.escape_half_life", opening.escape->half_life);
    list.input("opening.surface", opening.escape->surface);
  }
  for (auto& moment : opening.after) list.input("opening.after", moment);
  list.input("opening.reclose_after", opening.reclose_after);
}

void conditioning_inputs(DoubtList& list, ConditioningCase& conditioning) {
  list.input("conditioning.dose", conditioning.dose);
  list.input("conditioning.residual", conditioning.residual_temperature);
  if (conditioning.residual) {
    list.input("conditioning.residual.CO2", conditioning.residual->amount,
               unit_of(conditioning.residual->measure));
  }
  list.input("conditioning.yield", conditioning.yield);
}

void supply_inputs(DoubtList& list, const Case& c, SupplyCase& supply) {
  list.input("supply.liquid", supply.flow);
  list.input("supply.amount", supply.amount);
  for (auto& in : supply.incoming) {
    list.input("supply.incoming." + std::string(c.medium.gases[in.gas].name), in.amount,
               unit_of(in.measure));
  }
  list.input("supply.purge", supply.purge);
}

}  // namespace

Shares contact_shares(const Case& c, Fraction found) {
  double given = found.value();
  bool has_rest = false;
  for (const auto& line : c.contact.gas) {
    has_rest = has_rest || line.rest;
    if (!line.rest && !line.find) given += line.share.now().value();
  }
  // Without a rest the lines add up to 1 within the tolerance of bind; they are scaled to it, so
  // that a doubt in one line is borne by the others in proportion.
  const double scale = has_rest ? 1.0 : 1.0 / given;
  Shares shares(c.medium.size(), Fraction(0.0));
  for (const auto& line : c.contact.gas) {
    const double own = line.find ? found.value() : line.share.now().value() * scale;
    const double share = line.rest ? 1.0 - given : own;
    for (std::size_t i = 0; i < shares.size(); ++i) {
      shares[i] = shares[i] + line.parts[i] * share;
    }
  }
  return shares;
}

std::vector<Doubt> each_doubt(Case& c) {
  DoubtList list;
  auto& contact = c.contact;
  list.input("contact.temperature", contact.temperature);
  list.input("contact.pressure", contact.gauge_pressure);
  list.input("contact.pressure", contact.absolute_pressure);
  if (contact.content) {
    list.input("contact.dissolved." + std::string(c.medium.gases[contact.content->gas].name),
               contact.content->amount, unit_of(contact.content->measure));
  }
  list.input("contact.altitude", c.ambient.altitude);
  list.input("contact.ambient", c.ambient.stated);
  list.input("contact.depth", contact.depth);
  list.input("contact.approach", contact.approach);
  for (auto& line : contact.gas) list.input("gas." + line.name, line.share);
  if (c.container) {
    list.input("container.brimful", c.container->brimful);
    auto& container = *c.container;
    list.input("container.fill", container.fill);
    list.input("container.fill_mass", container.fill_mass);
    list.input("container.closed_at.temperature", container.closing_temperature);
    list.input("container.closed_at.pressure", container.closing_absolute);
    list.input("container.closed_at.pressure", container.closing_gauge);
    list.input("container.closed_at.air", container.closing_air);
    list.input("container.closed_at.air", container.closing_air_volume);
    if (container.closing_oxygen) {
      list.input("container.closed_at.dissolved_oxygen", container.closing_oxygen->amount,
                 unit_of(container.closing_oxygen->measure));
    }
    for (auto& loss : container.filling_loss) {
      list.input("container.filling_loss." + std::string(c.medium.gases[loss.gas].name),
                 loss.amount, unit_of(loss.measure));
    }
    list.input("container.nitrogen_dose", container.nitrogen_dose);
    package_doubts(list, c);
  }
  if (c.opening) opening_inputs(list, *c.opening);
  if (c.conditioning) conditioning_inputs(list, *c.conditioning);
  if (c.supply) supply_inputs(list, c, *c.supply);
  if (c.gauge) {
    list.input("gauge.pressure", c.gauge->pressure);
    list.input("gauge.temperature", c.gauge->temperature);
    list.input("gauge.offset.pressure", c.gauge->pressure_offset);
    list.input("gauge.offset.temperature", c.gauge->temperature_offset);
    list.input("gauge.piercer_volume", c.gauge->dead);
  }
  for (auto& solute : c.medium.liquid.solutes) {
    list.input("liquid." + std::string(solute.name), solute.amount);
  }
  list.input("liquid.density", c.medium.liquid.measured_density);
  each_record_doubt(c, [&](RecordDoubt& doubt) { list.record(doubt); });
  return list.take();
}

}  // namespace capsigh
