#include "capsigh/readings/source.hpp"

#include <fcntl.h>
#include <fmt/format.h>
#include <sys/stat.h>
#include <unistd.h>
#include <zlib.h>

#include <algorithm>
#include <cerrno>
#include <cstring>
#include <vector>

namespace capsigh {
namespace {

constexpr std::size_t kCompressedBlock = std::size_t{1} << 16U;
constexpr unsigned char kGz[2] = {0x1f, 0x8b};
constexpr int kGzWindow = 15 + 16;  // the largest window, gz framing

Finding failure(const std::string& name, std::string message) {
  Finding f;
  f.code = "file";
  f.message = std::move(message);
  f.place = Place{name, 0, 0, 1, ""};
  return f;
}

}  // namespace

struct ByteSource::State {
  std::string name;
  int descriptor = -1;
  bool owned = false;
  bool started = false;
  bool gz = false;
  bool within = false;  // between the beginning and the end of one gz member
  z_stream stream{};
  std::vector<unsigned char> raw;  // read and not yet given out
  std::size_t at = 0;

  State() = default;
  State(const State&) = delete;
  State& operator=(const State&) = delete;
  ~State() {
    if (gz) inflateEnd(&stream);
    if (owned && descriptor >= 0) static_cast<void>(::close(descriptor));
  }

  [[nodiscard]] std::size_t left() const { return raw.size() - at; }

  std::variant<std::size_t, Finding> from_system(void* into, std::size_t size) const {
    for (;;) {
      const auto n = ::read(descriptor, into, size);
      if (n >= 0) return static_cast<std::size_t>(n);
      if (errno != EINTR) {
        return failure(name, fmt::format("cannot be read: {}", std::strerror(errno)));
      }
    }
  }

  // Reads on into `raw`; false at the end.
  std::variant<bool, Finding> refill() {
    raw.erase(raw.begin(), raw.begin() + static_cast<std::ptrdiff_t>(at));
    at = 0;
    const std::size_t kept = raw.size();
    raw.resize(kept + kCompressedBlock);
    const auto got = from_system(raw.data() + kept, kCompressedBlock);
    raw.resize(kept + (std::holds_alternative<std::size_t>(got) ? std::get<std::size_t>(got) : 0));
    if (const auto* problem = std::get_if<Finding>(&got)) return *problem;
    return raw.size() > kept;
  }

  // Looks at the first two bytes.
  std::optional<Finding> start() {
    started = true;
    while (left() < sizeof kGz) {
      const auto more = refill();
      if (const auto* problem = std::get_if<Finding>(&more)) return *problem;
      if (!std::get<bool>(more)) break;
    }
    gz = left() >= sizeof kGz && std::equal(kGz, kGz + sizeof kGz, raw.begin());
    if (gz && inflateInit2(&stream, kGzWindow) != Z_OK) {
      gz = false;
      return failure(name, "gz cannot be unpacked: no memory");
    }
    within = gz;
    return std::nullopt;
  }

  // Before another gz member: whether there is one. Zeros that pad a tape are skipped.
  std::variant<bool, Finding> next_member() {
    for (;;) {
      while (left() > 0 && raw[at] == 0) ++at;
      if (left() >= sizeof kGz) break;
      const auto more = refill();
      if (const auto* problem = std::get_if<Finding>(&more)) return *problem;
      if (!std::get<bool>(more)) break;
    }
    if (left() == 0) return false;
    if (left() < sizeof kGz || raw[at] != kGz[0] || raw[at + 1] != kGz[1]) {
      return failure(name, "after the end of the gz there are bytes that are no gz");
    }
    inflateReset(&stream);
    within = true;
    return true;
  }

  std::variant<std::size_t, Finding> unpack(std::span<char> into) {
    for (;;) {
      if (!within) {
        const auto member = next_member();
        if (const auto* problem = std::get_if<Finding>(&member)) return *problem;
        if (!std::get<bool>(member)) return std::size_t{0};
      }
      if (left() == 0) {
        const auto more = refill();
        if (const auto* problem = std::get_if<Finding>(&more)) return *problem;
        if (!std::get<bool>(more)) {
          return failure(name, "the gz ends before its end: it was cut off");
        }
      }
      stream.next_in = raw.data() + at;
      stream.avail_in = static_cast<uInt>(left());
      // zlib writes bytes; that they are read as characters is the meaning of a text file.
      stream.next_out = static_cast<Bytef*>(static_cast<void*>(into.data()));
      stream.avail_out = static_cast<uInt>(into.size());
      const int state = inflate(&stream, Z_NO_FLUSH);
      at = raw.size() - stream.avail_in;
      const std::size_t got = into.size() - stream.avail_out;
      if (state == Z_STREAM_END) {
        within = false;
      } else if (state != Z_OK && state != Z_BUF_ERROR) {
        return failure(name, "the gz is damaged");
      }
      if (got > 0) return got;
    }
  }
};

ByteSource::ByteSource(std::unique_ptr<State> state) : state_(std::move(state)) {}
ByteSource::ByteSource(ByteSource&&) noexcept = default;
ByteSource& ByteSource::operator=(ByteSource&&) noexcept = default;
ByteSource::~ByteSource() = default;

std::variant<ByteSource, Finding> ByteSource::open(const std::string& path) {
  auto state = std::make_unique<State>();
  state->name = path == "-" ? "standard input" : path;
  state->owned = path != "-";
  state->descriptor = path == "-" ? STDIN_FILENO : ::open(path.c_str(), O_RDONLY | O_CLOEXEC);
  if (state->descriptor < 0) {
    return failure(path, fmt::format("cannot be opened: {}", std::strerror(errno)));
  }
  struct stat about {};
  if (::fstat(state->descriptor, &about) == 0 && S_ISDIR(about.st_mode)) {
    return failure(path, fmt::format("cannot be read as readings: {}", std::strerror(EISDIR)));
  }
  return ByteSource(std::move(state));
}

std::variant<std::size_t, Finding> ByteSource::read(std::span<char> into) {
  State& s = *state_;
  if (!s.started) {
    if (auto problem = s.start()) return *problem;
  }
  if (s.gz) return s.unpack(into);
  if (s.left() > 0) {
    const std::size_t n = std::min(into.size(), s.left());
    std::memcpy(into.data(), s.raw.data() + s.at, n);
    s.at += n;
    return n;
  }
  return s.from_system(into.data(), into.size());
}

const std::string& ByteSource::name() const { return state_->name; }

}  // namespace capsigh
