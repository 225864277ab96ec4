// Files in and out, for the command.
#pragma once

#include <optional>
#include <string>

#include "capsigh/quantity/finding.hpp"

namespace capsigh::cli {

/// The bytes of a file, or of standard input for "-"; a directory, a missing or an unreadable file
/// is a finding.
Outcome<std::string> read_input(const std::string& path);

/// Writes text to standard output (empty path), or to a file that is whole or absent. A finding
/// where the system failed.
std::optional<Finding> deliver(const std::string& text, const std::string& path);

}  // namespace capsigh::cli
