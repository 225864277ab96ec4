// What a pass over readings costs. Usage: capsigh_readings_bench FILE [full|constants] THREADS
// "constants" makes the same pass with kernel, verdict and probability replaced by constants; the
// statistics run in both. Prints rows, rejected rows, seconds, and
// processor seconds of all threads.
#include <fmt/format.h>

#include <chrono>
#include <cstdio>
#include <cstdlib>
#include <ctime>
#include <string>

#include "../readings/plans.hpp"
#include "capsigh/readings/readings.hpp"

int main(int argc, char** argv) {
  if (argc != 4) return 2;
  auto plan = capsigh::test::reading_plan(capsigh::test::kSparklingWater);
  plan.constants_for_benchmark = std::string(argv[2]) == "constants";
  capsigh::ReadingsRequest request;
  request.input = argv[1];
  request.out = "/dev/null";
  request.threads = static_cast<unsigned>(std::atoi(argv[3]));
  const auto start = std::chrono::steady_clock::now();
  const auto run = capsigh::judge_readings(request, plan, {});
  const std::chrono::duration<double> took = std::chrono::steady_clock::now() - start;
  for (const auto& f : run.findings) fmt::print(stderr, "{}\n", f.message);
  const double cpu = static_cast<double>(std::clock()) / CLOCKS_PER_SEC;
  fmt::print("{} {} {:.3f} {:.3f}\n", run.summary.rows, run.summary.rejected, took.count(), cpu);
  return run.findings.empty() ? 0 : 1;
}
