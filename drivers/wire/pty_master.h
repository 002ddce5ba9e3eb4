#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <memory>
#include <string>

#include "drivers/wire/line_clock.h"
#include "drivers/wire/owned_fd.h"
#include "drivers/wire/port.h"
#include "station/base/result.h"

namespace probewright::wire {

class Descriptor;

/// The device's end of a pseudo-terminal, for emulated devices. The station opens slave_path() or the link as a serial
/// line, again and again if it likes: while nobody has it open, reads wait and writes go into the buffer. Line thread
/// only; real time only (AsioClock); the clock must outlive it.
class PtyMaster final : public Port {
 public:
  /// `link`: a path that shall point to the slave, replacing an older link there; its folder must exist; empty: none.
  /// Errors: pty_failed, pty_link_failed (also when something else than a link stands there).
  static Result<std::unique_ptr<PtyMaster>> create(boost::asio::any_io_executor executor, LineClock& clock,
                                                   const std::string& link = {});
  ~PtyMaster() override;
  /// The slave's own path, "/dev/pts/N".
  const std::string& slave_path() const { return slave_path_; }
  /// The link if there is one, else the slave's path.
  const std::string& name() const override;

  asio::awaitable<std::size_t> read_some(std::span<std::byte> into, SteadyTime deadline) override;
  asio::awaitable<void> write_all(std::span<const std::byte> bytes, SteadyTime deadline) override;
  /// Waits until the station has read everything. The system drops unread bytes when the master closes, so a device
  /// whose last words count awaits this before close(). Throws DeadlinePassed, PortLost.
  asio::awaitable<void> drain(SteadyTime deadline);
  /// Like pulling the plug: the station's port is lost, unread bytes with it. The link goes if it is still ours.
  void close() override;

 private:
  PtyMaster(LineClock& clock, std::shared_ptr<Descriptor> line, OwnedFd slave, std::string slave_path,
            std::string link);
  LineClock& clock_;
  std::shared_ptr<Descriptor> line_;
  std::shared_ptr<OwnedFd> slave_;  // held open, so that the master never sees a hang-up while no station is there
  std::string slave_path_, link_;
};

}  // namespace probewright::wire
