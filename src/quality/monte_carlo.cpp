#include "capsigh/quality/monte_carlo.hpp"

#include <algorithm>
#include <atomic>
#include <boost/random/mersenne_twister.hpp>
#include <boost/random/normal_distribution.hpp>
#include <boost/random/seed_seq.hpp>
#include <boost/random/uniform_01.hpp>
#include <cmath>
#include <limits>
#include <mutex>
#include <thread>

namespace capsigh {
namespace {

constexpr std::uint64_t kBlock = 1024;

// Keeps the `most` smallest of all values it is shown, in room for twice as many.
class Smallest {
 public:
  explicit Smallest(std::size_t most) : most_(most) {}

  void add(double x) {
    if (x > bound_) return;
    kept_.push_back(x);
    if (kept_.size() >= 2 * most_) cut();
  }
  void add(const Smallest& other) {
    for (const double x : other.kept_) add(x);
  }
  // The n-th smallest, from 1; n is at most what is kept.
  double nth(std::size_t n) {
    const auto at = kept_.begin() + static_cast<std::ptrdiff_t>(n - 1);
    std::nth_element(kept_.begin(), at, kept_.end());
    return *at;
  }

 private:
  void cut() {
    const auto last = kept_.begin() + static_cast<std::ptrdiff_t>(most_ - 1);
    std::nth_element(kept_.begin(), last, kept_.end());
    bound_ = *last;
    kept_.resize(most_);
  }

  std::size_t most_;
  double bound_ = std::numeric_limits<double>::infinity();
  std::vector<double> kept_;
};

// Count, mean and sum of squared deviations (Welford; joined by Chan, Golub and LeVeque).
struct Moments {
  std::uint64_t n = 0;
  double mean = 0;
  double squares = 0;

  void add(double x) {
    ++n;
    const double delta = x - mean;
    mean += delta / static_cast<double>(n);
    squares += delta * (x - mean);
  }
  void add(const Moments& more) {
    if (more.n == 0) return;
    const auto total = static_cast<double>(n + more.n);
    const double delta = more.mean - mean;
    squares +=
        more.squares + delta * delta * static_cast<double>(n) * static_cast<double>(more.n) / total;
    mean += delta * static_cast<double>(more.n) / total;
    n += more.n;
  }
};

struct Tails {
  Smallest low;
  Smallest high;  // of the negative values
};

class Sampler {
 public:
  Sampler(const ModelMaker& make, std::span<const Shape> inputs, std::size_t figures,
          const SamplingPlan& plan)
      : make_(make),
        inputs_(inputs),
        figures_(figures),
        plan_(plan),
        blocks_((plan.draws + kBlock - 1) / kBlock),
        moments_(blocks_ * figures) {
    const double outside = 0.5 * (1.0 - plan.coverage) * static_cast<double>(plan.draws);
    const auto kept = static_cast<std::size_t>(outside) + 2;
    tails_.assign(figures, Tails{Smallest(kept), Smallest(kept)});
  }

  std::vector<SampledFigure> run() {
    {
      std::vector<std::jthread> threads;
      for (unsigned t = 1; t < plan_.threads; ++t) threads.emplace_back([this] { work(); });
      work();
    }
    std::vector<SampledFigure> result;
    for (std::size_t f = 0; f < figures_; ++f) result.push_back(figure(f));
    return result;
  }

 private:
  void work() {
    const Model model = make_();
    auto tails = tails_;  // empty still
    for (std::uint64_t block = next_++; block < blocks_; block = next_++) {
      draw_block(block, model, tails);
      report();
    }
    const std::scoped_lock lock(mutex_);
    for (std::size_t f = 0; f < figures_; ++f) {
      joined_.resize(figures_, tails_.front());
      joined_[f].low.add(tails[f].low);
      joined_[f].high.add(tails[f].high);
    }
  }

  void draw_block(std::uint64_t block, const Model& model, std::vector<Tails>& tails) {
    constexpr unsigned half = 32;
    boost::random::seed_seq seeds{
        static_cast<std::uint32_t>(plan_.seed), static_cast<std::uint32_t>(plan_.seed >> half),
        static_cast<std::uint32_t>(block), static_cast<std::uint32_t>(block >> half)};
    boost::random::mt19937_64 generator(seeds);
    boost::random::normal_distribution<double> normal;
    boost::random::uniform_01<double> uniform;
    std::vector<double> z(inputs_.size());
    std::vector<double> values(figures_);
    Moments* moments = &moments_[block * figures_];
    const auto draws = std::min(kBlock, plan_.draws - block * kBlock);
    for (std::uint64_t i = 0; i < draws; ++i) {
      for (std::size_t d = 0; d < z.size(); ++d) {
        z[d] = inputs_[d] == Shape::normal ? normal(generator)
                                           : (2.0 * uniform(generator) - 1.0) * std::sqrt(3.0);
      }
      model(z, values);
      for (std::size_t f = 0; f < figures_; ++f) {
        if (std::isnan(values[f])) continue;
        moments[f].add(values[f]);
        tails[f].low.add(values[f]);
        tails[f].high.add(-values[f]);
      }
    }
  }

  void report() {
    const auto done = ++done_;
    if (!plan_.progress) return;
    const std::unique_lock lock(mutex_, std::try_to_lock);
    if (lock) plan_.progress(static_cast<double>(done) / static_cast<double>(blocks_));
  }

  // Blocks in their order, so that the last bits do not depend on the threads.
  SampledFigure figure(std::size_t f) {
    Moments all;
    for (std::uint64_t block = 0; block < blocks_; ++block) {
      all.add(moments_[block * figures_ + f]);
    }
    SampledFigure result;
    result.answered = all.n;
    if (all.n < 2) return result;
    result.mean = all.mean;
    result.u = std::sqrt(all.squares / static_cast<double>(all.n - 1));
    // JCGM 101, 7.7: y(r) and y(r + q), q = pM and r = (M − q)/2, both rounded to whole draws.
    const auto m = static_cast<double>(all.n);
    const double q = std::floor(plan_.coverage * m + 0.5);
    const double r = std::max(std::floor(0.5 * (m - q) + 0.5), 1.0);
    result.low = joined_[f].low.nth(static_cast<std::size_t>(r));
    const double from_top = std::max(m - r - q + 1.0, 1.0);
    result.high = -joined_[f].high.nth(static_cast<std::size_t>(from_top));
    return result;
  }

  const ModelMaker& make_;
  std::span<const Shape> inputs_;
  std::size_t figures_;
  const SamplingPlan& plan_;
  std::uint64_t blocks_;
  std::vector<Moments> moments_;  // block by block
  std::vector<Tails> tails_;
  std::vector<Tails> joined_;
  std::atomic<std::uint64_t> next_{0};
  std::atomic<std::uint64_t> done_{0};
  std::mutex mutex_;
};

}  // namespace

std::vector<SampledFigure> sample(const ModelMaker& make, std::span<const Shape> inputs,
                                  std::size_t figures, const SamplingPlan& plan) {
  return Sampler(make, inputs, figures, plan).run();
}

}  // namespace capsigh
