#pragma once
#include <boost/asio/awaitable.hpp>
#include <boost/asio/io_context.hpp>
#include <cstdint>
#include <vector>

#include "drivers/adapter/driver.h"
#include "drivers/emulated/bench.h"
#include "drivers/phantom/driver.h"
#include "drivers/wire/virtual_clock.h"
#include "station/base/entropy.h"
#include "station/measure/certificate.h"
#include "station/measure/model.h"
#include "station/measure/reading.h"
#include "station/sequence/capture_book.h"

namespace probewright::sequence::production {

namespace asio = boost::asio;

/// What a simulated nest stands on. The documents outlive it.
struct SimulatedPlace {
  const measure::Model& model;
  const measure::Certificates& certificates;  ///< of the emulated bench's nest 1
  std::uint64_t seed = 1;                     ///< noise, and how probes sit
  emulated::StationErrors errors;             ///< what the certificates do not tell of this station
  double room_degC = 25.0;
};

/// One nest in software under its own virtual clock: the emulated bench, and this station's drivers and routine as in
/// production, without a line and a ledger around them. The same seed and the same calls give the same readings.
/// One thread at a time.
class SimulatedNest {
 public:
  explicit SimulatedNest(const SimulatedPlace& place);
  SimulatedNest(const SimulatedNest&) = delete;
  SimulatedNest& operator=(const SimulatedNest&) = delete;

  /// Seats the probe, makes one run and takes the probe out. Errors: what a device had to tell, our_bug.
  Result<std::vector<measure::Reading>> test(const emulated::Probe& probe);
  /// Lets time pass.
  void rest(double time_s);

 private:
  asio::awaitable<void> connect();
  asio::awaitable<void> make_run(CaptureBook& book);
  asio::awaitable<void> gather(CaptureBook& book);
  /// Runs work to its end; what it throws comes out.
  void complete(asio::awaitable<void> work);

  SimulatedPlace place_;
  asio::io_context io_;
  wire::VirtualClock clock_;
  SeededEntropy entropy_;
  emulated::Bench bench_;
  phantom::Driver phantom_;
  adapter::Driver adapter_;
};

}  // namespace probewright::sequence::production
