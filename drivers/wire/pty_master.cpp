#include "drivers/wire/pty_master.h"

#include <fcntl.h>
#include <stdlib.h>
#include <sys/ioctl.h>
#include <termios.h>

#include <array>
#include <cerrno>
#include <filesystem>
#include <optional>
#include <system_error>

#include "drivers/wire/descriptor.h"

namespace probewright::wire {
namespace {

namespace fs = std::filesystem;

struct Pair {
  OwnedFd master, slave;
  std::string slave_path;
};

Problem failed(int error) { return Problem{"pty_failed", "", {{"reason", std::generic_category().message(error)}}}; }

/// Raw from the start: else bytes sent before the station sets its end up would be echoed and rewritten.
bool make_raw(int fd) {
  termios settings{};
  if (::tcgetattr(fd, &settings) != 0) return false;
  ::cfmakeraw(&settings);
  return ::tcsetattr(fd, TCSANOW, &settings) == 0;
}

Result<Pair> open_pair() {
  Pair pair;
  pair.master.reset(::posix_openpt(O_RDWR | O_NOCTTY | O_NONBLOCK | O_CLOEXEC));
  if (!pair.master || ::grantpt(pair.master.get()) != 0 || ::unlockpt(pair.master.get()) != 0) return failed(errno);
  std::array<char, 128> path{};
  if (const int error = ::ptsname_r(pair.master.get(), path.data(), path.size())) return failed(error);
  pair.slave_path = path.data();
  pair.slave.reset(::open(path.data(), O_RDWR | O_NOCTTY | O_NONBLOCK | O_CLOEXEC));
  if (!pair.slave || !make_raw(pair.slave.get())) return failed(errno);
  return pair;
}

/// Replaces an older link in one step, so that a station that looks never finds nothing.
std::optional<Problem> make_link(const std::string& link, const std::string& target) {
  const auto problem = [&](const std::string& reason) {
    return Problem{"pty_link_failed", link, {{"reason", reason}}};
  };
  std::error_code error;
  const auto there = fs::symlink_status(link, error);
  if (fs::exists(there) && !fs::is_symlink(there)) return problem("something else stands there");
  const std::string beside = link + ".new";
  fs::remove(beside, error);
  fs::create_symlink(target, beside, error);
  if (!error) fs::rename(beside, link, error);
  if (error) return problem(error.message());
  return std::nullopt;
}

void remove_link(const std::string& link, const std::string& target) {
  std::error_code error;
  if (fs::read_symlink(link, error) == target && !error) fs::remove(link, error);
}

int unread(int slave) {
  int count = 0;
  return ::ioctl(slave, FIONREAD, &count) == 0 ? count : 0;
}

asio::awaitable<void> drain_line(LineClock* clock, std::shared_ptr<Descriptor> line, std::shared_ptr<OwnedFd> slave,
                                 SteadyTime deadline) {
  // The kernel hands bytes over in pieces and on a thread of its own, which a busy machine lets wait: an empty buffer
  // must be seen empty several times in a row.
  constexpr auto moment = std::chrono::milliseconds(2);
  constexpr int looks = 8;
  for (int empty = 0; empty < looks;) {
    if (!line->is_open()) throw PortLost(line->name(), "closed");
    if (clock->steady_now() > deadline) throw DeadlinePassed(line->name());
    empty = unread(slave->get()) == 0 ? empty + 1 : 0;
    co_await clock->wait_until(clock->steady_now() + moment);
  }
}

}  // namespace

Result<std::unique_ptr<PtyMaster>> PtyMaster::create(asio::any_io_executor executor, LineClock& clock,
                                                     const std::string& link) {
  auto pair = open_pair();
  if (!pair) return pair.error();
  if (!link.empty())
    if (const auto problem = make_link(link, pair->slave_path)) return *problem;
  auto line = std::make_shared<Descriptor>(std::move(executor), clock, pair->master.get(),
                                           link.empty() ? pair->slave_path : link);
  pair->master.release();
  return std::unique_ptr<PtyMaster>{
      new PtyMaster{clock, std::move(line), std::move(pair->slave), pair->slave_path, link}};
}

PtyMaster::PtyMaster(LineClock& clock, std::shared_ptr<Descriptor> line, OwnedFd slave, std::string slave_path,
                     std::string link)
    : clock_(clock),
      line_(std::move(line)),
      slave_(std::make_shared<OwnedFd>(std::move(slave))),
      slave_path_(std::move(slave_path)),
      link_(std::move(link)) {}

PtyMaster::~PtyMaster() { close(); }

const std::string& PtyMaster::name() const { return line_->name(); }

asio::awaitable<std::size_t> PtyMaster::read_some(std::span<std::byte> into, SteadyTime deadline) {
  return Descriptor::read(line_, into, deadline);
}

asio::awaitable<void> PtyMaster::write_all(std::span<const std::byte> bytes, SteadyTime deadline) {
  return Descriptor::write(line_, bytes, deadline);
}

asio::awaitable<void> PtyMaster::drain(SteadyTime deadline) { return drain_line(&clock_, line_, slave_, deadline); }

void PtyMaster::close() {
  if (!line_->is_open()) return;
  if (!link_.empty()) remove_link(link_, slave_path_);
  line_->close();
  slave_->reset();
}

}  // namespace probewright::wire
