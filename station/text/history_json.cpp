#include "station/text/history_words.h"

namespace probewright::text {
namespace {

Json json_of(const db::NamedDocument& document) {
  Json json = Json::object();
  json.set("role", document.role).set("kind", document.kind).set("name", document.name);
  json.set("revision", document.revision).set("sha256", to_hex(document.digest));
  return json;
}

Json json_of(const db::RunDevice& device) {
  Json json = Json::object();
  json.set("role", device.role).set("identity", device.identity).set("firmware", device.firmware);
  json.set("certificate", device.certificate_number);
  json.set("certificate_sha256", device.certificate ? Json{to_hex(*device.certificate)} : Json{});
  return json;
}

Json json_of(const db::ReadingRow& reading) {
  Json json = Json::object();
  json.set("check", reading.check).set("value", reading.value).set("unit", reading.unit);
  json.set("expanded_uncertainty", reading.expanded_uncertainty);
  json.set("none_reason", reading.none_reason.empty() ? Json{} : Json{reading.none_reason});
  json.set("lower", reading.lower).set("upper", reading.upper);
  json.set("acceptance_lower", reading.acceptance_lower).set("acceptance_upper", reading.acceptance_upper);
  json.set("margin", reading.margin).set("conformance_probability", reading.conformance_probability);
  json.set("state", trace::slug(trace::standing_of(reading)));
  json.set("definition", reading.definition).set("cut_short", reading.cut_short);
  return json;
}

Json json_of(const db::CaptureRecord& capture) {
  Json json = Json::object();
  json.set("number", capture.number).set("kind", capture.kind).set("set", capture.set_label);
  json.set("bytes", capture.decoded_size).set("sha256", to_hex(capture.decoded_digest));
  json.set("pruned", capture.pruned);
  return json;
}

Json words_of(const std::vector<std::string>& items) {
  Json list = Json::array();
  for (const std::string& item : items) list.add(item);
  return list;
}

/// Members that an open run has too, with nothing in them.
void set_closing(Json& json, const std::optional<db::ClosingRecord>& closing) {
  if (!closing) {
    for (const char* key : {"closed_at", "closing_entry", "verdict", "cause", "cause_words", "proof", "bench"})
      json.set(key, nullptr);
    json.set("failing", Json::array()).set("provisional", false);
    return;
  }
  json.set("closed_at", to_text(closing->closed_at)).set("closing_entry", closing->entry);
  json.set("verdict", closing->verdict).set("cause", closing->cause).set("cause_words", closing->cause_words);
  json.set("proof", to_hex(closing->proof)).set("bench", text::json_of(closing->bench));
  json.set("failing", words_of(closing->failing)).set("provisional", closing->provisional);
}

}  // namespace

/// Outside the unnamed namespace: from there it would not see the functions that the header names.
template <class T>
static Json list_of(const std::vector<T>& items) {
  Json list = Json::array();
  for (const T& item : items) list.add(json_of(item));
  return list;
}

Json json_of(const db::RunRecord& run) {
  const db::RunOpened& opened = run.opened;
  Json json = Json::object();
  json.set("run", run.run.value).set("opened_at", to_text(run.opened_at));
  set_closing(json, run.closing);
  json.set("purpose", opened.purpose).set("emulated", opened.emulated).set("try", opened.try_number);
  json.set("station", opened.station).set("nest", opened.nest).set("operator", opened.operator_name);
  json.set("lot", opened.lot).set("model", opened.model);
  json.set("ambient_temperature_C", opened.ambient_temperature_C);
  json.set("documents", list_of(run.documents)).set("devices", list_of(opened.devices));
  Json software = Json::object();
  software.set("version", opened.software_version).set("commit", opened.software_commit);
  json.set("software", std::move(software.set("compiler", opened.compiler)));
  json.set("readings", list_of(run.readings)).set("captures", list_of(run.captures));
  return json;
}

Json json_of(const db::EntryRecord& entry) {
  Json json = Json::object();
  json.set("entry", entry.number).set("time", to_text(entry.time)).set("kind", entry.kind).set("who", entry.who);
  return std::move(json.set("data", json_of(entry.data)));
}

Json json_of(const trace::History& history) {
  Json json = Json::object();
  json.set("format", 1).set("serial", history.serial);
  json.set("seal", to_hex(history.seal.hash)).set("seal_entry", history.seal.entry);
  json.set("runs", list_of(history.runs)).set("entries", list_of(history.entries));
  return json;
}

Json json_of(const Body& body) {
  if (const auto* text = body.string()) return *text;
  if (const auto* number = body.integer()) return *number;
  if (const auto* flag = body.boolean()) return *flag;
  if (const auto* items = body.array()) {
    Json list = Json::array();
    for (const Body& item : *items) list.add(json_of(item));
    return list;
  }
  if (const auto* members = body.object()) {
    Json json = Json::object();
    for (const auto& [key, value] : *members) json.set(key, json_of(value));
    return json;
  }
  return nullptr;
}

}  // namespace probewright::text
