// Bytes of a file or of standard input, gz or not, in constant memory.
#pragma once

#include <cstddef>
#include <memory>
#include <optional>
#include <span>
#include <string>
#include <variant>

#include "capsigh/quantity/finding.hpp"

namespace capsigh {

/// A stream of bytes. A slow pipe gives what there is; gz is recognised by its first two bytes.
class ByteSource {
 public:
  /// Opens a file, or standard input for "-".
  static std::variant<ByteSource, Finding> open(const std::string& path);

  ByteSource(ByteSource&&) noexcept;
  ByteSource& operator=(ByteSource&&) noexcept;
  ~ByteSource();

  /// At least one byte unless the end is reached (0); waits for it. A gz that ends before its end
  /// is a finding, after all that could be read.
  std::variant<std::size_t, Finding> read(std::span<char> into);

  /// The name for messages.
  [[nodiscard]] const std::string& name() const;

 private:
  struct State;
  explicit ByteSource(std::unique_ptr<State> state);
  std::unique_ptr<State> state_;
};

}  // namespace capsigh
