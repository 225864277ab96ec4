// Times as people and loggers write them. ISO 8601 is always understood; dates with names of months
// or dots too. 03/04/2026 is 3 April in one country and 4 March in another: the order must be said.
#pragma once

#include <cstdint>
#include <optional>
#include <string_view>

namespace capsigh {

/// Which of day and month comes first in dates written with slashes.
enum class DateOrder : std::uint8_t { unknown, day_first, month_first };

struct Timestamp {
  double seconds = 0;  ///< since 1970-01-01 00:00, UTC where a zone is given, else plant time
  bool zoned = false;
};

enum class TimeFault : std::uint8_t {
  none,
  unreadable,
  impossible,  ///< 31 February, 25 o'clock
  ambiguous,   ///< day and month could change places
};

struct ReadTime {
  Timestamp time;
  TimeFault fault = TimeFault::none;
  DateOrder order = DateOrder::unknown;  ///< what the text itself shows, of dates with slashes
};

/// Reads "2026-03-01T06:30:00+01:00", "2026-03-01 06:30", "20260301T063000Z", "1.3.2026 06:30",
/// "1 Mar 2026 6:30 pm", "Mar 1, 2026 06:30", and, where `order` is known or a number above 12
/// shows it, "01/03/2026 06:30". Years have four digits.
ReadTime read_time(std::string_view text, DateOrder order);

}  // namespace capsigh
