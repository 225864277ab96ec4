#include "capsigh/readings/fixed.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <cstring>

namespace capsigh {
namespace {

// Beyond this the scaled value loses the digits that tell a tie.
constexpr double kFastest = 1e8;
// A scaled value this near to a tie might lie on its other side: above its own rounding error, 1e8
// times 2^-53.
constexpr double kTie = 0.5 - 1e-6;

constexpr char kPairs[] =
    "0001020304050607080910111213141516171819202122232425262728293031323334353637383940414243444546"
    "4"
    "7484950515253545556575859606162636465666768697071727374757677787980818283848586878889909192939"
    "49596979899";

}  // namespace

FixedPoint::FixedPoint(int decimals, char point)
    : decimals_(decimals), point_(point), scale_(std::pow(10.0, decimals)) {}

char* FixedPoint::exactly(char* out, double value) const {
  char* end = fmt::format_to(out, "{:.{}f}", value, decimals_);
  const bool zero = std::all_of(out, end, [](char c) { return c == '-' || c == '0' || c == '.'; });
  if (zero && *out == '-') {
    std::memmove(out, out + 1, static_cast<std::size_t>(end - out - 1));
    --end;
  }
  if (point_ != '.') std::replace(out, end, '.', point_);
  return end;
}

char* FixedPoint::write(char* out, double value) const {
  const double scaled = value * scale_;
  if (!(std::abs(scaled) < kFastest)) return exactly(out, value);
  const double whole = std::nearbyint(scaled);
  if (std::abs(scaled - whole) > kTie) return exactly(out, value);
  auto n = static_cast<std::uint32_t>(std::abs(whole));
  if (whole < 0) *out++ = '-';
  // Digits from the last, two at a time, into a field wide enough for all of them.
  constexpr std::size_t width = 12;
  char digits[width];
  std::size_t at = width;
  while (n >= 10) {
    at -= 2;
    std::memcpy(digits + at, kPairs + std::size_t{2} * (n % 100), 2);
    n /= 100;
  }
  if (n > 0 || at == width) digits[--at] = static_cast<char>('0' + n);
  std::size_t count = width - at;
  const auto decimals = static_cast<std::size_t>(decimals_);
  while (count <= decimals) {
    digits[--at] = '0';
    ++count;
  }
  // A pair may have begun with a zero that is none of the number's.
  while (count > decimals + 1 && digits[at] == '0') {
    ++at;
    --count;
  }
  const std::size_t before = count - decimals;
  std::memcpy(out, digits + at, before);
  out += before;
  if (decimals > 0) {
    *out++ = point_;
    std::memcpy(out, digits + at + before, decimals);
    out += decimals;
  }
  return out;
}

}  // namespace capsigh
