// Breaking long lines.
#pragma once

#include <string>
#include <string_view>

namespace capsigh::render_detail {

/// Text broken at spaces so that no line exceeds 80 columns; the first line starts with `head`,
/// following ones with as many spaces. The control character \x1f is a space that is not broken at.
std::string wrapped(std::string_view head, std::string_view text);

/// The number of columns a UTF-8 text takes (one a code point).
std::size_t columns(std::string_view text);

/// A control character would act on the terminal, a broken byte garble it: both are replaced.
std::string printable(std::string_view text);

/// Text filled with spaces to that many columns.
std::string padded(std::string_view text, std::size_t width);

}  // namespace capsigh::render_detail
