// Checks that must pass before the TOML library sees the bytes: it overruns its buffer on a
// truncated UTF-8 sequence and its recursion has no bottom.
#pragma once

#include <optional>
#include <string>
#include <string_view>

#include "capsigh/document/document.hpp"

namespace capsigh::document_detail {

std::optional<Finding> guard(std::string_view text, const std::string& file,
                             const DocumentLimits& limits);

/// The place of a byte offset in the text.
Place place_at(std::string_view text, const std::string& file, std::size_t offset);

}  // namespace capsigh::document_detail
