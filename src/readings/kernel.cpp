#include "capsigh/readings/kernel.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>
#include <numbers>

#include "table.hpp"

namespace capsigh {

using readings_detail::Function;
using readings_detail::kFunctions;
using readings_detail::kOrder;
using readings_detail::Piece;

namespace {

// The shape in pressure at one temperature: content = exp(a - s p) (p - q).
struct Plain {
  double a = 0;
  double s = 0;
  double q = 0;
};

constexpr double kPieceWidth = 1.0;     // K
constexpr double kSameEdge = 1e-6;      // K, nearer edges are one
constexpr double kAgreement = 1e-9;     // relative; the promise is 1e-8
constexpr double kLeastPartial = 2e4;   // Pa over the vapour, where the shape in p is sampled from
constexpr double kSampledStep = 3e5;    // Pa, and in these steps
constexpr double kRelativeStep = 1e-5;  // of T and p, where a slope is taken from the laws
constexpr double kVarianceStart = 1e5;  // Pa over the vapour: where doubts are sampled from

// a, s and q of exp(a - s p) (p - q) through three contents at p - h, p, p + h.
Plain plain_through(const std::array<double, 3>& content, double p, double h) {
  std::array<double, 3> ln{};
  std::transform(content.begin(), content.end(), ln.begin(), [](double c) { return std::log(c); });
  const double curvature = -std::expm1(ln[0] - 2.0 * ln[1] + ln[2]);  // h²/(p - q)²
  const double above = h / std::sqrt(curvature);
  const double slope = (std::log((above + h) / (above - h)) - (ln[2] - ln[0])) / (2.0 * h);
  return {ln[1] - std::log(above) + slope * p, slope, p - above};
}

template <class Content>
Plain sample(const Content& content, double low, double high) {
  const double h = 0.5 * (high - low);
  const double p = low + h;
  return plain_through({content(low), content(p), content(high)}, p, h);
}

// Monomial coefficients in (T - middle) of the polynomial through Chebyshev nodes of half-width w.
std::array<double, kOrder> through_nodes(const std::array<double, kOrder>& at_node, double w) {
  // Chebyshev polynomials in powers of (T - middle)/w.
  constexpr double powers[kOrder][kOrder] = {
      {1}, {0, 1}, {-1, 0, 2}, {0, -3, 0, 4}, {1, 0, -8, 0, 8}};
  std::array<double, kOrder> all{};
  for (std::size_t k = 0; k < kOrder; ++k) {
    double c = 0;
    for (std::size_t j = 0; j < kOrder; ++j) {
      c += at_node[j] * std::cos(std::numbers::pi * static_cast<double>(k) *
                                 (static_cast<double>(j) + 0.5) / kOrder);
    }
    c *= (k == 0 ? 1.0 : 2.0) / kOrder;
    for (std::size_t i = 0; i < kOrder; ++i) all[i] += c * powers[k][i];
  }
  double scale = 1;
  for (double& c : all) {
    c *= scale;
    scale /= w;
  }
  return all;
}

// The relative variance of all but the instruments: a square in p, linear in T over the piece.
void fit_variance(Piece& piece, const ReadingLaws& laws) {
  std::array<std::array<double, 3>, 2> ends{};
  for (std::size_t i = 0; i < ends.size(); ++i) {
    const auto t = from_si<Temperature>(i == 0 ? piece.low : piece.high);
    const double start = laws.at(t).at.vapour.value() + kVarianceStart;
    const std::array<double, 3> p{start, start + kSampledStep, start + 2.0 * kSampledStep};
    const auto v = laws.other_variance(t, p);
    const double first = (v[1] - v[0]) / kSampledStep;
    const double second = (v[2] - 2.0 * v[1] + v[0]) / (2.0 * kSampledStep * kSampledStep);
    ends[i] = {v[0] - first * p[0] + second * p[0] * p[1], first - second * (p[0] + p[1]), second};
  }
  for (std::size_t k = 0; k < ends[0].size(); ++k) {
    piece.variance[0][k] = 0.5 * (ends[0][k] + ends[1][k]);
    piece.variance[1][k] = (ends[1][k] - ends[0][k]) / (piece.high - piece.low);
  }
}

}  // namespace

void ReadingBlock::resize(std::size_t rows) {
  size_ = rows;
  const std::size_t n = (rows + kLanes - 1) / kLanes * kLanes;
  temperature.resize(n);
  pressure.resize(n);
  content.resize(n);
  u.resize(n);
  probability.resize(n);
  inside_model.resize(n);
  // What stands in the padding is computed and thrown away.
  for (std::size_t i = rows; i < n; ++i) temperature[i] = pressure[i] = 0;
}

Kernel::Kernel(const ReadingLaws& laws)
    : laws_(laws),
      form_{laws.share(), std::max(laws.convention_pressure().low, 0.0),
            std::min(laws.convention_pressure().high, laws.pressure_limit()),
            laws.least_partial()} {
  const Interval limits = laws_.temperature_limits();
  std::vector<double> all = laws_.edges();
  std::erase_if(all, [&](double t) { return !(t > limits.low && t < limits.high); });
  const auto buckets = static_cast<std::size_t>(std::ceil(limits.width() / kPieceWidth));
  for (std::size_t i = 0; i < buckets; ++i) {
    all.push_back(limits.low + static_cast<double>(i) * kPieceWidth);
  }
  std::sort(all.begin(), all.end());
  for (const double t : all) {
    if (edges_.empty() || t - edges_.back() > kSameEdge) edges_.push_back(t);
  }
  bucket_.resize(buckets);
  for (std::size_t i = 0; i < buckets; ++i) {
    const double from = limits.low + static_cast<double>(i) * kPieceWidth;
    const auto first = std::upper_bound(edges_.begin(), edges_.end(), from) - edges_.begin() - 1;
    bucket_[i] = static_cast<std::uint32_t>(std::max<std::ptrdiff_t>(first, 0));
  }
  edges_.push_back(limits.high);
  pieces_ = std::vector<std::atomic<const Piece*>>(edges_.size() - 1);
  owned_.resize(edges_.size() - 1);
}

Kernel::~Kernel() = default;

const Piece* Kernel::piece(double kelvin) const {
  if (!(kelvin >= edges_.front() && kelvin <= edges_.back())) return nullptr;
  const auto b = static_cast<std::size_t>((kelvin - edges_.front()) / kPieceWidth);
  std::size_t i = bucket_[std::min(b, bucket_.size() - 1)];
  while (i + 2 < edges_.size() && kelvin >= edges_[i + 1]) ++i;
  if (const Piece* known = pieces_[i].load(std::memory_order_acquire)) return known;
  const std::lock_guard lock(making_);
  if (!owned_[i]) {
    owned_[i] = make(i);
    pieces_[i].store(owned_[i].get(), std::memory_order_release);
  }
  return owned_[i].get();
}

// The convention over composition at one temperature: ln F = a - s x + ln((x - zero)/(x - pole)).
std::array<double, 4> Kernel::factor_at(const ReadingLaws::At& at) const {
  const auto relation = [&](double p) { return laws_.relation_over_pure(at, p); };
  const auto pure = [&](double p) { return laws_.composition_over_pure(at, p); };
  const double vapour = at.edge.vapour.value();
  const double low = std::max(form_.low, vapour + form_.least_partial);
  if (form_.high <= low) return {std::log(relation(low) / pure(low)), 0, vapour, vapour};
  const auto above = sample(relation, low, form_.high);
  const auto below = sample(pure, low, form_.high);
  return {above.a - below.a, above.s - below.s, above.q, below.q};
}

std::unique_ptr<Piece> Kernel::make(std::size_t index) const {
  auto made = std::make_unique<Piece>();
  Piece& piece = *made;
  piece.low = edges_[index];
  piece.high = edges_[index + 1];
  piece.middle = 0.5 * (piece.low + piece.high);
  piece.tested = laws_.tested();
  const double half = 0.5 * (piece.high - piece.low);
  std::array<std::array<double, kOrder>, kFunctions> nodes{};
  piece.most = laws_.pressure_limit();
  for (std::size_t j = 0; j < kOrder; ++j) {
    const double angle = std::numbers::pi * (static_cast<double>(j) + 0.5) / kOrder;
    const auto at = laws_.at(from_si<Temperature>(piece.middle + half * std::cos(angle)));
    const double start = at.at.vapour.value() + kLeastPartial;
    const auto own = sample([&](double p) { return laws_.by_composition(at, p); }, start,
                            start + 2.0 * kSampledStep);
    nodes[Function::ln_k][j] = own.a;
    nodes[Function::slope][j] = own.s;
    nodes[Function::zero][j] = own.q;
    if (piece.tested) {
      const auto f = factor_at(at);
      nodes[Function::ln_f][j] = f[0];
      nodes[Function::slope_f][j] = f[1];
      nodes[Function::zero_f][j] = f[2];
      nodes[Function::pole_f][j] = f[3];
    }
  }
  for (std::size_t f = 0; f < kFunctions; ++f) {
    const auto c = through_nodes(nodes[f], half);
    for (std::size_t k = 0; k < kOrder; ++k) piece.coefficient[k][f] = c[k];
  }
  for (const double t : {piece.low, piece.high}) {
    const auto at = laws_.at(from_si<Temperature>(t));
    piece.most = std::min(piece.most, laws_.condenses_at(at));
  }
  fit_variance(piece, laws_);
  piece.by_laws = !agrees(piece);
  if (piece.by_laws) ++distrusted_;
  return made;
}

// Between the nodes, where a polynomial is furthest off, and in every stretch of pressure.
bool Kernel::agrees(const Piece& piece) const {
  const double half = 0.5 * (piece.high - piece.low);
  for (const double where : {-0.999, -0.707, 0.0, 0.707, 0.999}) {
    const double kelvin = piece.middle + where * half;
    const auto at = laws_.at(from_si<Temperature>(kelvin));
    const double start = at.at.vapour.value() + kLeastPartial;
    // The total pressure at which the convention is read at x.
    const auto read_at = [&](double x) {
      const double vapour = at.at.vapour.value();
      return vapour + (x - vapour) / form_.share;
    };
    for (const double p :
         {start, start + 0.5 * kSampledStep, start + 2.0 * kSampledStep, laws_.pressure_limit(),
          read_at(1.1 * form_.low), read_at(0.5 * (form_.low + form_.high)),
          read_at(0.9 * form_.high), read_at(1.1 * form_.high)}) {
      if (!(p >= start && p <= piece.most)) continue;
      const double truth = laws_.content(at, p);
      const double got =
          readings_detail::content_of(readings_detail::row_of(piece, form_, kelvin, p));
      if (!(std::abs(got - truth) <= kAgreement * truth)) return false;
    }
  }
  return true;
}

Sensitivity Kernel::by_laws(double kelvin, double pascal) const {
  const auto t = from_si<Temperature>(kelvin);
  const auto state = laws_.at(t);
  const double content = laws_.content(state, pascal);
  const auto ln_at = [&](double k, double p) {
    return std::log(laws_.content(laws_.at(from_si<Temperature>(k)), p));
  };
  const double dp = kRelativeStep * pascal;
  const double dt = kRelativeStep * kelvin;
  return {content, (ln_at(kelvin + dt, pascal) - ln_at(kelvin - dt, pascal)) / (2.0 * dt),
          (ln_at(kelvin, pascal + dp) - ln_at(kelvin, pascal - dp)) / (2.0 * dp),
          laws_.other_variance(t, {pascal, pascal, pascal})[0]};
}

Sensitivity Kernel::sensitivity(double kelvin, double pascal) const {
  const Piece* p = piece(kelvin);
  if (p == nullptr || p->by_laws) return by_laws(kelvin, pascal);
  const auto row = readings_detail::row_of(*p, form_, kelvin, pascal);
  return {readings_detail::content_of(row), row.by_temperature, row.by_pressure,
          std::max(row.other_variance, 0.0)};
}

std::optional<Refusal> Kernel::refusal(double kelvin, double pascal) const {
  const Interval limits = laws_.temperature_limits();
  if (!limits.contains(kelvin)) {
    return Refusal{RefusalCode::temperature_beyond_model, kelvin,
                   kelvin < limits.low ? limits.low : limits.high};
  }
  return laws_.refusal(laws_.at(from_si<Temperature>(kelvin)), pascal);
}

void Kernel::evaluate(ReadingBlock& block, const InstrumentDoubt& doubt) const {
  // A row that no piece serves is worked out in a piece that does no harm, and then by the laws.
  static const Piece harmless;
  const double u_p = std::hypot(doubt.gauge.value(), doubt.ambient.value());
  block.pieces.resize(block.padded());
  for (std::size_t i = 0; i < block.padded(); ++i) {
    const Piece* at = i < block.size() ? piece(block.temperature[i]) : nullptr;
    const bool serves = at != nullptr && !at->by_laws && block.pressure[i] <= at->most;
    block.pieces[i] = serves ? at : &harmless;
  }
  // In between, `probability` holds p less the pressure at which nothing is dissolved.
  readings_detail::contents(block, form_, doubt.temperature.value(), u_p);
  for (std::size_t i = 0; i < block.size(); ++i) {
    block.inside_model[i] = block.pieces[i] != &harmless && block.probability[i] > 0 ? 1 : 0;
    if (block.inside_model[i] != 0 || refusal(block.temperature[i], block.pressure[i])) continue;
    const auto exact = by_laws(block.temperature[i], block.pressure[i]);
    const double of_t = exact.by_temperature * doubt.temperature.value();
    const double of_p = exact.by_pressure * u_p;
    block.content[i] = exact.content;
    block.u[i] = exact.content * std::sqrt(of_t * of_t + of_p * of_p + exact.other_variance);
    block.inside_model[i] = 1;
  }
}

void Kernel::conformity(ReadingBlock& block, const Interval& limits) {
  for (std::size_t i = block.size(); i < block.padded(); ++i) block.content[i] = block.u[i] = 0;
  readings_detail::conformity(block.padded(), block.content.data(), block.u.data(),
                              block.probability.data(), limits.low, limits.high);
}

}  // namespace capsigh
