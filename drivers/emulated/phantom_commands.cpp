#include <algorithm>

#include "drivers/emulated/arguments.h"
#include "drivers/emulated/phantom_device.h"

// The table of commands, and those of drivers/phantom/WIRE.md, sections 2.1 and 2.2.
namespace probewright::emulated {
const std::vector<PhantomDevice::Command>& PhantomDevice::commands() {
  using D = PhantomDevice;
  static const std::vector<Command> table{
      {"*IDN?", &D::identify},
      {"*RST", &D::reset},
      {"*CLS", &D::clear_status},
      {"*ESE", &D::event_enable},
      {"*ESE?", &D::ask_event_enable},
      {"*ESR?", &D::ask_events},
      {"*SRE", &D::service_enable},
      {"*SRE?", &D::ask_service_enable},
      {"*STB?", &D::ask_status},
      {"*OPC", &D::operation_complete},
      {"*OPC?", &D::ask_operation_complete},
      {"*WAI", &D::wait_to_continue},
      {"*TST?", &D::self_test},
      {"SYSTem:ERRor[:NEXT]?", &D::ask_error},
      {"SYSTem:CHECksum", &D::checksum},
      {"SYSTem:CHECksum?", &D::ask_checksum},
      {"SYSTem:ECHO?", &D::ask_echo},
      {"SYSTem:VERSion?", &D::ask_version},
      {"SYSTem:BOOT?", &D::ask_boot},
      {"CERTificate:NUMBer?", &D::ask_certificate},
      {"CERTificate:DUE?", &D::ask_due},
      {"SPECtrum:EXPosure", &D::exposure},
      {"SPECtrum:EXPosure?", &D::ask_exposure},
      {"SPECtrum:AVERage", &D::average},
      {"SPECtrum:AVERage?", &D::ask_average},
      {"SPECtrum:SHUTter", &D::shutter},
      {"SPECtrum:SHUTter?", &D::ask_shutter},
      {"SPECtrum:READ?", &D::ask_reading},
      {"SPECtrum:WAVelength?", &D::ask_wavelength},
      {"MODulator:SETPoint", &D::set_point},
      {"MODulator:SETPoint?", &D::ask_set_point},
      {"MODulator:SETPoint:LIST?", &D::ask_set_points},
      {"MODulator:RATE", &D::rate},
      {"MODulator:RATE?", &D::ask_rate},
      {"MODulator:DEPTh:RED", &D::red_depth},
      {"MODulator:DEPTh:RED?", &D::ask_red_depth},
      {"MODulator:DEPTh:INFRared", &D::infrared_depth},
      {"MODulator:DEPTh:INFRared?", &D::ask_infrared_depth},
      {"MODulator:STATe", &D::modulate},
      {"MODulator:STATe?", &D::ask_modulate},
      {"MODulator:SETTled?", &D::ask_settled},
      {"PATH:OPAQue", &D::blade},
      {"PATH:OPAQue?", &D::ask_blade},
      {"LAMP:STATe", &D::lamp},
      {"LAMP:STATe?", &D::ask_lamp},
      {"LAMP:LEVel", &D::lamp_level},
      {"LAMP:LEVel?", &D::ask_lamp_level},
      {"LAMP:FLICker", &D::lamp_flicker},
      {"LAMP:FLICker?", &D::ask_lamp_flicker},
      {"LINE:STATe", &D::line_lamp},
      {"LINE:STATe?", &D::ask_line_lamp},
      {"LINE:LIST?", &D::ask_lines},
      {"TEMPerature?", &D::ask_temperature},
      {"LID?", &D::ask_lid},
      {"PROBe?", &D::ask_probe},
      {"PROBe:COUNt?", &D::ask_probe_count},
  };
  return table;
}

// --- 2.1 common

PhantomDevice::Outcome PhantomDevice::identify(const wire::Unit& unit) {
  const DeviceIdentity& identity = setup_.identity;
  return {.fault = no_parameters(unit),
          .answer = identity.maker + ",PHANTOM," + identity.serial + "," + identity.firmware};
}

PhantomDevice::Outcome PhantomDevice::reset(const wire::Unit& unit) {
  if (const int fault = no_parameters(unit)) return {.fault = fault};
  const double now_s = clock_.now_s();
  settings_ = {};
  apply_modulation();
  nest_->set_blade(now_s, false);
  nest_->set_lamp(now_s, settings_.lamp);
  optics_changed(now_s);
  return {};
}

PhantomDevice::Outcome PhantomDevice::clear_status(const wire::Unit& unit) {
  if (const int fault = no_parameters(unit)) return {.fault = fault};
  status_.clear();
  complete_at_s_.reset();
  return {};
}

PhantomDevice::Outcome PhantomDevice::event_enable(const wire::Unit& unit) {
  Arguments arguments{unit};
  const long mask = arguments.integer(0, 255);
  if (const int fault = arguments.fault()) return {.fault = fault};
  status_.event_enable = static_cast<unsigned>(mask);
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_event_enable(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = std::to_string(status_.event_enable)};
}

PhantomDevice::Outcome PhantomDevice::ask_events(const wire::Unit& unit) {
  if (const int fault = no_parameters(unit)) return {.fault = fault};
  return {.answer = std::to_string(status_.take_events())};
}

PhantomDevice::Outcome PhantomDevice::service_enable(const wire::Unit& unit) {
  Arguments arguments{unit};
  const long mask = arguments.integer(0, 255);
  if (const int fault = arguments.fault()) return {.fault = fault};
  status_.service_enable = static_cast<unsigned>(mask);
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_service_enable(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = std::to_string(status_.service_enable)};
}

PhantomDevice::Outcome PhantomDevice::ask_status(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = std::to_string(status_.status_byte())};
}

PhantomDevice::Outcome PhantomDevice::operation_complete(const wire::Unit& unit) {
  if (const int fault = no_parameters(unit)) return {.fault = fault};
  complete_at_s_ = settled_at_s();
  settle_events();
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_operation_complete(const wire::Unit& unit) {
  if (const int fault = no_parameters(unit)) return {.fault = fault};
  return {.busy_s = std::max(0.0, settled_at_s() - clock_.now_s()), .answer = "1"};
}

PhantomDevice::Outcome PhantomDevice::wait_to_continue(const wire::Unit& unit) {
  if (const int fault = no_parameters(unit)) return {.fault = fault};
  return {.busy_s = std::max(0.0, settled_at_s() - clock_.now_s())};
}

PhantomDevice::Outcome PhantomDevice::self_test(const wire::Unit& unit) {
  if (const int fault = no_parameters(unit)) return {.fault = fault};
  return {.busy_s = 0.2, .answer = "0"};
}

// --- 2.2 system

PhantomDevice::Outcome PhantomDevice::ask_error(const wire::Unit& unit) {
  if (const int fault = no_parameters(unit)) return {.fault = fault};
  return {.answer = status_.next()};
}

PhantomDevice::Outcome PhantomDevice::checksum(const wire::Unit& unit) { return set_flag(unit, checksum_mode_, 0.0); }

PhantomDevice::Outcome PhantomDevice::ask_checksum(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = truth_text(checksum_mode_)};
}

PhantomDevice::Outcome PhantomDevice::ask_echo(const wire::Unit& unit) {
  Arguments arguments{unit};
  const std::string text = arguments.text(1, 32);
  return {.fault = arguments.fault(), .answer = wire::quoted(text)};
}

PhantomDevice::Outcome PhantomDevice::ask_version(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = "1999.0"};
}

PhantomDevice::Outcome PhantomDevice::ask_boot(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = std::to_string(boot_)};
}

PhantomDevice::Outcome PhantomDevice::ask_certificate(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = wire::quoted(setup_.identity.certificate)};
}

PhantomDevice::Outcome PhantomDevice::ask_due(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = wire::quoted(setup_.identity.due)};
}

/// ON or OFF; a change keeps the device busy for `busy_s`.
PhantomDevice::Outcome PhantomDevice::set_flag(const wire::Unit& unit, bool& flag, double busy_s) {
  Arguments arguments{unit};
  const bool value = arguments.truth();
  if (const int fault = arguments.fault()) return {.fault = fault};
  const bool changes = value != flag;
  flag = value;
  return {.busy_s = changes ? busy_s : 0.0};
}

}  // namespace probewright::emulated
