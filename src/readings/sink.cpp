#include "capsigh/readings/sink.hpp"

#include <fcntl.h>
#include <fmt/format.h>
#include <unistd.h>

#include <cerrno>
#include <cstring>
#include <utility>

namespace capsigh {
namespace {

Finding failure(const std::string& name, const std::string& what) {
  Finding f;
  f.code = "file";
  f.message = fmt::format("{}: {}", what, std::strerror(errno));
  f.place = Place{name, 0, 0, 1, ""};
  return f;
}

}  // namespace

RowSink::RowSink(std::string name, int descriptor, bool owned)
    : name_(std::move(name)), descriptor_(descriptor), owned_(owned) {}

RowSink::RowSink(RowSink&& other) noexcept { *this = std::move(other); }

RowSink& RowSink::operator=(RowSink&& other) noexcept {
  std::swap(name_, other.name_);
  std::swap(descriptor_, other.descriptor_);
  std::swap(owned_, other.owned_);
  std::swap(comparing_, other.comparing_);
  std::swap(kept_, other.kept_);
  std::swap(stood_, other.stood_);
  return *this;
}

RowSink::~RowSink() {
  if (owned_ && descriptor_ >= 0) static_cast<void>(::close(descriptor_));
}

std::variant<RowSink, Finding> RowSink::open(const std::string& path, bool resume) {
  if (path.empty()) return RowSink("standard output", STDOUT_FILENO, false);
  const int flags = O_RDWR | O_CREAT | O_CLOEXEC | (resume ? 0 : O_TRUNC);
  constexpr mode_t anyone = 0666;  // less the user's mask
  int descriptor = ::open(path.c_str(), flags, anyone);
  // Some devices and pipes are for writing only.
  if (descriptor < 0 && !resume) descriptor = ::open(path.c_str(), O_WRONLY | O_CLOEXEC);
  if (descriptor < 0) return failure(path, "cannot be written");
  RowSink sink(path, descriptor, true);
  sink.comparing_ = resume;
  return sink;
}

std::variant<RowSink, Finding> RowSink::standard_error() {
  return RowSink("standard error", STDERR_FILENO, false);
}

Finding RowSink::differs() const {
  Finding f;
  f.code = "resume-differs";
  f.message = fmt::format(
      "what stands in the file was not written from this input and recipe: it differs within the "
      "{} bytes after byte {}",
      stood_.size(), kept_);
  f.expected = "the same input, recipe and program as in the run that was interrupted";
  f.example = "without --resume the file is written anew";
  f.place = Place{name_, 0, 0, 1, ""};
  return f;
}

// Takes off the bytes that stand in the file already.
std::optional<Finding> RowSink::compare(std::string_view& bytes) {
  while (comparing_ && !bytes.empty()) {
    stood_.resize(bytes.size());
    const auto n = ::read(descriptor_, stood_.data(), stood_.size());
    if (n < 0 && errno == EINTR) continue;
    if (n < 0) return failure(name_, "cannot be read");
    const auto size = static_cast<std::size_t>(n);
    stood_.resize(size);
    if (size == 0) comparing_ = false;
    if (std::memcmp(stood_.data(), bytes.data(), size) != 0) return differs();
    kept_ += size;
    bytes.remove_prefix(size);
  }
  return std::nullopt;
}

std::optional<Finding> RowSink::write(std::string_view bytes) {
  if (auto problem = compare(bytes)) return problem;
  while (!bytes.empty()) {
    const auto n = ::write(descriptor_, bytes.data(), bytes.size());
    if (n < 0 && errno == EINTR) continue;
    if (n < 0) return failure(name_, "cannot be written");
    bytes.remove_prefix(static_cast<std::size_t>(n));
  }
  return std::nullopt;
}

std::optional<Finding> RowSink::finish() {
  if (comparing_) {
    char more = 0;
    stood_.resize(1);
    if (::read(descriptor_, &more, 1) > 0) return differs();
  }
  if (owned_ && ::close(std::exchange(descriptor_, -1)) != 0 && errno != EINTR) {
    return failure(name_, "cannot be written");
  }
  return std::nullopt;
}

}  // namespace capsigh
