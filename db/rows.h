#pragma once
#include <compare>
#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "station/base/canonical_json.h"
#include "station/base/digest.h"
#include "station/base/times.h"

namespace probewright::db {

/// A run is known by the number of its opening entry.
struct RunId {
  std::int64_t value = 0;
  auto operator<=>(const RunId&) const = default;
};

/// The newest entry and its hash: what a printed report shows so that another ledger in its place is noticed.
struct Seal {
  std::int64_t entry = 0;
  Digest hash{};
  bool operator==(const Seal&) const = default;
};

/// A document that a run stands on; it must already be in the ledger (Change::add_document).
struct RunDocument {
  std::string role;  ///< "model", "sheet", "budget", "station" ...
  Digest digest{};
};

/// A device as it was when the run opened.
struct RunDevice {
  std::string role;      ///< "phantom", "adapter"
  std::string identity;  ///< as the device said it
  std::string firmware;
  std::string certificate_number;     ///< empty: none
  std::optional<Digest> certificate;  ///< digest of the certificate's document, which must be in the ledger
};

/// What is known before the first device command.
struct RunOpened {
  std::string serial;
  std::string purpose = "production";  ///< production engineering reference challenge gauge echo training return
  bool emulated = false;               ///< any device says so
  std::string lot;                     ///< empty: no lot
  std::string model;
  int nest = 1;  ///< from 1
  std::string station;
  std::string operator_name;
  /// Which run of this purpose it is for this serial, from 1. 0: the store counts. Any other must equal its count.
  int try_number = 0;
  std::vector<RunDocument> documents;
  std::vector<RunDevice> devices;
  std::string software_version, software_commit, compiler;
  std::optional<double> ambient_temperature_C;
};

/// One check's outcome. Finite numbers only; -0.0 is stored as 0.0.
struct ReadingRow {
  std::string check;  ///< slug of the catalogue
  std::optional<double> value;
  std::string none_reason;  ///< why there is no value ("blocked_by:probe_present"); empty where there is one
  std::optional<double> expanded_uncertainty;  ///< k = 2, in `unit`
  std::string unit;
  std::optional<double> lower, upper, acceptance_lower, acceptance_upper;  ///< as applied, in `unit`
  std::optional<double> margin;
  std::optional<double> conformance_probability;
  /// ok, not_ok: judged; watch, record: not judged, with or without a value; none: should be judged, but no value.
  std::string ok = "record";
  std::string definition;  ///< what the value is: id or hash of the method and its parameters
  bool cut_short = false;  ///< the run was ending when it was made
};

struct RunClosed {
  RunId run;
  std::string verdict;               ///< pass, fail, void
  std::string cause;                 ///< slug, for fail and void ("device_lost"); may be empty for pass and fail
  std::string cause_words;           ///< the same for people
  std::vector<std::string> failing;  ///< slugs of the checks that decided a fail
  bool provisional = false;
  Body bench;                   ///< state of the bench: strings and integers only
  std::string who = "station";  ///< "station", or the person who ended it
};

/// A document, kept once by the SHA-256 of its text.
struct DocumentRow {
  std::string kind;  ///< model, sheet, certificate, station ...
  std::string name, revision;
  std::string text;  ///< UTF-8, no zero byte
  std::string who = "station";
};

struct SignatureRow {
  Digest document{};
  std::string signer;      ///< the person; no person signs a document twice
  std::string role;        ///< engineer, quality
  std::string meaning;     ///< "drafted", "approved for production"
  std::string public_key;  ///< Ed25519, 64 hexadecimal digits; may be empty until stations hold keys
  std::string signature;   ///< Ed25519 over the document's bytes, 128 hexadecimal digits; empty with the key
};

}  // namespace probewright::db
