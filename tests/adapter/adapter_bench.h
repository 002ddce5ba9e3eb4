#pragma once
#include "drivers/adapter/driver.h"
#include "tests/adapter/fake_adapter.h"
#include "tests/wire/driver_trial.h"

/// The driver before the fake adapter on a virtual line.
struct AdapterBench : trial::DriverBench<probewright::adapter::Driver, FakeAdapter> {
  explicit AdapterBench(probewright::adapter::Settings settings = expected_device(), double speed = 1.0)
      : DriverBench(speed) {
    driver.emplace(std::move(settings), source(), line.clock(), entropy);
  }
  static probewright::adapter::Settings expected_device() {
    probewright::adapter::Settings settings;
    settings.link.device = "adapter of nest 1";
    settings.expected = {"AD-01", "ADC-2026-0101", "2027-06-30", "1.0.0", true};
    settings.ceiling = {25000, 22000};
    return settings;
  }
  void connect() {
    line.run([this] { return driver->connect(); });
  }
  probewright::adapter::Driver& adapter() { return *driver; }
  std::size_t asked(std::uint8_t type) const {
    std::size_t n = 0;
    for (const auto& request : fake.requests) n += request.type == type;
    return n;
  }
};
