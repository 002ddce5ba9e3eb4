#include "drivers/wire/serial_port.h"

#include <fcntl.h>
#include <sys/file.h>
#include <sys/ioctl.h>
#include <sys/stat.h>
#include <sys/sysmacros.h>
#include <termios.h>
#include <unistd.h>

#include <array>
#include <cerrno>
#include <optional>
#include <system_error>

#include "drivers/wire/descriptor.h"
#include "drivers/wire/owned_fd.h"

namespace probewright::wire {
namespace {

class SerialPort final : public Port {
 public:
  explicit SerialPort(std::shared_ptr<Descriptor> line) : line_(std::move(line)) {}
  ~SerialPort() override { line_->close(); }
  asio::awaitable<std::size_t> read_some(std::span<std::byte> into, SteadyTime deadline) override {
    return Descriptor::read(line_, into, deadline);
  }
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override {
    return Descriptor::write(line_, bytes, deadline);
  }
  const std::string& name() const override { return line_->name(); }
  void close() override { line_->close(); }

 private:
  std::shared_ptr<Descriptor> line_;
};

struct Rate {
  int baud;
  speed_t code;
};
constexpr std::array rates = std::to_array<Rate>(
    {{1200, B1200},       {2400, B2400},       {4800, B4800},       {9600, B9600},       {19200, B19200},
     {38400, B38400},     {57600, B57600},     {115200, B115200},   {230400, B230400},   {460800, B460800},
     {500000, B500000},   {576000, B576000},   {921600, B921600},   {1000000, B1000000}, {1152000, B1152000},
     {1500000, B1500000}, {2000000, B2000000}, {2500000, B2500000}, {3000000, B3000000}, {3500000, B3500000},
     {4000000, B4000000}});

std::optional<speed_t> code_of(int baud) {
  for (const Rate& rate : rates)
    if (rate.baud == baud) return rate.code;
  return std::nullopt;
}

Problem failed(const std::string& path, int error) {
  return Problem{"port_failed", path, {{"reason", std::generic_category().message(error)}}};
}

Problem not_opened(const std::string& path, int error) {
  switch (error) {
    case ENOENT:
    case ENOTDIR:
    case ENODEV:
    case ENXIO:
      return Problem{"port_missing", path};
    case EBUSY:
      return Problem{"port_busy", path};
    case EACCES:
    case EPERM:
      return Problem{"port_permission", path};
    default:
      return failed(path, error);
  }
}

bool is_pseudo_terminal(int fd) {
  struct stat status {};
  const bool known = ::fstat(fd, &status) == 0;
  return known && major(status.st_rdev) >= 136 && major(status.st_rdev) <= 143;  // numbers kept by the kernel's list
}

/// Nothing when the line is ours.
std::optional<Problem> claim(int fd, const std::string& path) {
  if (::flock(fd, LOCK_EX | LOCK_NB) != 0)
    return errno == EWOULDBLOCK ? Problem{"port_busy", path} : failed(path, errno);
  if (!is_pseudo_terminal(fd) && ::ioctl(fd, TIOCEXCL) != 0) return failed(path, errno);
  return std::nullopt;
}

std::optional<Problem> set_up(int fd, const std::string& path, int baud) {
  const auto code = code_of(baud);
  const Problem no_such_rate{"port_baud", path, {{"baud", std::to_string(baud)}}};
  if (!code) return no_such_rate;
  termios settings{};
  if (::tcgetattr(fd, &settings) != 0) return failed(path, errno);
  ::cfmakeraw(&settings);
  settings.c_cflag &= ~static_cast<tcflag_t>(CSTOPB | CRTSCTS);
  settings.c_cflag |= CREAD | CLOCAL;
  settings.c_iflag |= IGNPAR;
  ::cfsetspeed(&settings, *code);
  if (::tcsetattr(fd, TCSANOW, &settings) != 0) return errno == EINVAL ? no_such_rate : failed(path, errno);
  termios in_force{};  // tcsetattr succeeds when it could do any of what was asked
  if (::tcgetattr(fd, &in_force) != 0) return failed(path, errno);
  if (::cfgetospeed(&in_force) != *code) return no_such_rate;
  ::tcflush(fd, TCIOFLUSH);
  return std::nullopt;
}

}  // namespace

Result<std::unique_ptr<Port>> open_serial(asio::any_io_executor executor, const LineClock& clock,
                                          const std::string& path, int baud) {
  OwnedFd fd{::open(path.c_str(), O_RDWR | O_NOCTTY | O_NONBLOCK | O_CLOEXEC)};
  if (!fd) return not_opened(path, errno);
  if (!::isatty(fd.get())) return Problem{"port_not_a_tty", path};
  if (const auto problem = claim(fd.get(), path)) return *problem;
  if (const auto problem = set_up(fd.get(), path, baud)) return *problem;
  auto line = std::make_shared<Descriptor>(std::move(executor), clock, fd.get(), path);
  fd.release();
  return std::unique_ptr<Port>{new SerialPort{std::move(line)}};
}

}  // namespace probewright::wire
