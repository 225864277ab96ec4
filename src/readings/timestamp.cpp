#include "capsigh/readings/timestamp.hpp"

#include <array>
#include <chrono>
#include <cstddef>
#include <string>

namespace capsigh {
namespace {

constexpr double kMinute = 60;
constexpr double kHour = 3600;
constexpr double kDay = 86400;

constexpr std::array<std::string_view, 12> kMonths{"jan", "feb", "mar", "apr", "may", "jun",
                                                   "jul", "aug", "sep", "oct", "nov", "dec"};

bool is_digit(char c) { return c >= '0' && c <= '9'; }
bool is_letter(char c) { return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z'); }
char lower(char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c; }

class Reader {
 public:
  explicit Reader(std::string_view text) : text_(text) {}

  [[nodiscard]] bool done() const { return at_ == text_.size(); }
  [[nodiscard]] char peek(std::size_t ahead = 0) const {
    return at_ + ahead < text_.size() ? text_[at_ + ahead] : '\0';
  }
  bool take(char c) {
    if (peek() != c) return false;
    ++at_;
    return true;
  }
  void spaces() {
    while (peek() == ' ') ++at_;
  }
  // Digits up to `most` of them; −1 where there is none.
  int number(int most, int* digits = nullptr) {
    int value = 0;
    int n = 0;
    while (n < most && is_digit(peek())) {
      value = 10 * value + (text_[at_++] - '0');
      ++n;
    }
    if (digits != nullptr) *digits = n;
    return n > 0 ? value : -1;
  }
  double fraction() {
    double value = 0;
    double place = 0.1;
    for (; is_digit(peek()); ++at_, place *= 0.1) value += place * (text_[at_] - '0');
    return value;
  }
  std::string word() {
    std::string w;
    while (is_letter(peek())) w += lower(text_[at_++]);
    return w;
  }

 private:
  std::string_view text_;
  std::size_t at_ = 0;
};

struct Date {
  int year = 0;
  int month = 0;
  int day = 0;
  TimeFault fault = TimeFault::none;
  DateOrder order = DateOrder::unknown;
};

int month_named(const std::string& word) {
  if (word.size() < 3) return 0;
  for (std::size_t i = 0; i < kMonths.size(); ++i) {
    if (word.starts_with(kMonths[i])) return static_cast<int>(i) + 1;
  }
  return 0;
}

Date unreadable() {
  Date d;
  d.fault = TimeFault::unreadable;
  return d;
}

int year_of(Reader& in) {
  int digits = 0;
  const int year = in.number(4, &digits);
  return digits == 4 && !is_digit(in.peek()) ? year : -1;
}

// "1 Mar 2026", "1-Mar-2026", "Mar 1, 2026"
Date named_month(Reader& in, int day) {
  Date d;
  while (in.peek() == ' ' || in.peek() == '-' || in.peek() == '.') in.take(in.peek());
  d.month = month_named(in.word());
  in.take('.');
  if (d.month == 0) return unreadable();
  if (day < 0) {
    in.spaces();
    day = in.number(2);
    in.take(',');
  }
  while (in.peek() == ' ' || in.peek() == '-' || in.peek() == ',') in.take(in.peek());
  d.day = day;
  d.year = year_of(in);
  return d.year < 0 || d.day < 0 ? unreadable() : d;
}

// "01/03/2026"
Date slashes(Reader& in, int first, DateOrder order) {
  Date d;
  const int second = in.number(2);
  if (!in.take('/')) return unreadable();
  d.year = year_of(in);
  if (second < 0 || d.year < 0) return unreadable();
  constexpr int months = 12;
  if (first > months) d.order = DateOrder::day_first;
  if (second > months) d.order = DateOrder::month_first;
  if (first > months && second > months) d.fault = TimeFault::impossible;
  if (order == DateOrder::unknown) order = d.order;
  if (order == DateOrder::unknown && first == second) order = DateOrder::day_first;
  if (order == DateOrder::unknown) d.fault = TimeFault::ambiguous;
  d.day = order == DateOrder::month_first ? second : first;
  d.month = order == DateOrder::month_first ? first : second;
  return d;
}

Date read_date(Reader& in, DateOrder order) {
  if (is_letter(in.peek())) return named_month(in, -1);
  int digits = 0;
  Date d;
  const int first = in.number(4, &digits);
  if (digits == 4) {
    d.year = first;
    const bool dashed = in.take('-') || in.take('/');
    d.month = in.number(2);
    if (dashed && !in.take('-') && !in.take('/')) return unreadable();
    d.day = in.number(2);
    return d.month < 0 || d.day < 0 ? unreadable() : d;
  }
  if (digits == 0 || digits > 2) return unreadable();
  if (in.take('/')) return slashes(in, first, order);
  if (in.peek() == '.' && is_digit(in.peek(1))) {  // with dots the day comes first everywhere
    in.take('.');
    d.day = first;
    d.month = in.number(2);
    if (!in.take('.')) return unreadable();
    d.year = year_of(in);
    return d.year < 0 ? unreadable() : d;
  }
  return named_month(in, first);
}

bool read_zone(Reader& in, Timestamp& out) {
  in.spaces();
  if (in.take('Z') || in.take('z')) {
    out.zoned = true;
  } else if (in.peek() == '+' || in.peek() == '-') {
    const double sign = in.take('+') ? 1 : -1;
    if (sign < 0) in.take('-');
    const int hours = in.number(2);
    const bool colon = in.take(':');
    const int minutes = in.number(2);
    if (hours < 0 || (colon && minutes < 0)) return false;
    out.seconds -= sign * (hours * kHour + (minutes < 0 ? 0 : minutes) * kMinute);
    out.zoned = true;
  }
  return in.done();
}

// The time of day and the zone behind a date.
TimeFault read_clock(Reader& in, Timestamp& out) {
  if (in.done()) return TimeFault::none;
  if (!in.take('T') && !in.take('t') && !in.take(',') && in.peek() != ' ') {
    return TimeFault::unreadable;
  }
  in.spaces();
  int hour = in.number(2);
  const bool colon = in.take(':');
  const int minute = in.number(2);
  if (hour < 0 || minute < 0) return TimeFault::unreadable;
  double second = 0;
  if (colon ? in.take(':') : is_digit(in.peek())) {
    second = in.number(2);
    if (second < 0) return TimeFault::unreadable;
    if (in.take('.') || in.take(',')) second += in.fraction();
  }
  in.spaces();
  if (is_letter(in.peek()) && in.peek() != 'Z' && in.peek() != 'z') {
    const std::string half = in.word();
    constexpr int noon = 12;
    if ((half != "am" && half != "pm") || hour < 1 || hour > noon) return TimeFault::unreadable;
    hour = hour % noon + (half == "pm" ? noon : 0);
  }
  constexpr int last_hour = 23;
  constexpr int last_minute = 59;
  constexpr double leap_second = 61;
  if (hour > last_hour || minute > last_minute || second >= leap_second) {
    return TimeFault::impossible;
  }
  out.seconds += hour * kHour + minute * kMinute + second;
  return read_zone(in, out) ? TimeFault::none : TimeFault::unreadable;
}

}  // namespace

ReadTime read_time(std::string_view text, DateOrder order) {
  Reader in(text);
  ReadTime result;
  const Date d = read_date(in, order);
  result.order = d.order;
  result.fault = d.fault;
  if (d.fault != TimeFault::none) return result;
  namespace chrono = std::chrono;
  const chrono::year_month_day date{chrono::year(d.year),
                                    chrono::month(static_cast<unsigned>(d.month)),
                                    chrono::day(static_cast<unsigned>(d.day))};
  if (!date.ok()) {
    result.fault = TimeFault::impossible;
    return result;
  }
  result.time.seconds =
      kDay * static_cast<double>(chrono::sys_days(date).time_since_epoch().count());
  result.fault = read_clock(in, result.time);
  return result;
}

}  // namespace capsigh
