// Propagation of distributions (JCGM 101): a model is evaluated at many draws of its inputs, and
// the sample tells mean, standard uncertainty and coverage interval of each of its figures.
//
// The sequence of draws depends on the seed alone: every block of draws has a generator of its own
// (Mersenne Twister 64, seeded by seed and block), so that any number of threads gives the same
// result to the last bit.
#pragma once

#include <cstdint>
#include <functional>
#include <span>
#include <vector>

#include "capsigh/quantity/uncertain.hpp"

namespace capsigh {

/// Evaluates the model: `z` holds one standard score an input (rectangular: within ±√3), `values`
/// takes one number a figure; a figure without an answer at this draw is NaN.
using Model = std::function<void(std::span<const double> z, std::span<double> values)>;
/// Makes a model of its own for one thread.
using ModelMaker = std::function<Model()>;

struct SamplingPlan {
  std::uint64_t draws = 0;
  std::uint64_t seed = 0;
  unsigned threads = 1;
  double coverage = 0.95;                      ///< probability of the coverage interval
  std::function<void(double share)> progress;  ///< called now and then, from one thread at a time
};

/// What the draws say of one figure. The interval is probabilistically symmetric (JCGM 101, 7.7):
/// as many draws below it as above.
struct SampledFigure {
  std::uint64_t answered = 0;  ///< draws with an answer; the others are left out
  double mean = 0;
  double u = 0;  ///< standard deviation
  double low = 0;
  double high = 0;
};

/// Draws every input by its shape (exact ones are drawn as rectangular of no width by their model).
/// Memory: the two tails of each figure, (1 − coverage) draws of it.
std::vector<SampledFigure> sample(const ModelMaker& make, std::span<const Shape> inputs,
                                  std::size_t figures, const SamplingPlan& plan);

}  // namespace capsigh
