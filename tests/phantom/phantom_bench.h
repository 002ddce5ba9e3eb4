#pragma once
#include "drivers/phantom/driver.h"
#include "tests/phantom/fake_phantom.h"
#include "tests/wire/driver_trial.h"

/// The driver before the fake phantom on a virtual line.
struct PhantomBench : trial::DriverBench<probewright::phantom::Driver, FakePhantom> {
  explicit PhantomBench(probewright::phantom::Settings settings = expected_device(), double speed = 1.0)
      : DriverBench(speed) {
    driver.emplace(std::move(settings), source(), line.clock(), entropy);
  }
  static probewright::phantom::Settings expected_device() {
    probewright::phantom::Settings settings;
    settings.link.device = "phantom of nest 1";
    settings.expected = {"PH-01", "PHC-2026-0101", "2027-06-30", "1.0.0", true};
    settings.wavelength_nm = {600.0, 0.4402, -2.0e-7, -1.0e-10};
    return settings;
  }
  void connect() {
    line.run([this] { return driver->connect(); });
  }
  probewright::phantom::Driver& phantom() { return *driver; }
};
