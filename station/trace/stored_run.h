#pragma once
#include <map>
#include <memory>
#include <string>
#include <vector>

#include "db/queries/run_record.h"
#include "db/reader.h"
#include "limits/judge.h"
#include "station/measure/captures.h"
#include "station/measure/certificate.h"
#include "station/measure/model.h"
#include "station/measure/reading.h"

// A run made again from what the ledger keeps of it: its documents, its captures, and the same evaluate() and judge()
// that the line uses.
namespace probewright::trace {

/// The documents that decide a run's readings and verdict, as they were then.
struct RunBasis {
  std::shared_ptr<const measure::Model> model;  ///< with its haemoglobin table, where it names one
  std::shared_ptr<const limits::Sheet> sheet;
  std::shared_ptr<const measure::PhantomCertificate> phantom;
  std::shared_ptr<const measure::AdapterCertificate> adapter;
  measure::Certificates certificates() const { return {*phantom, *adapter}; }
};

/// Reads documents out of the ledger and keeps what it parsed. One thread, like its reader.
class StoredDocuments {
 public:
  explicit StoredDocuments(db::Reader& reader) : reader_(reader) {}
  /// Errors: stored_document_missing (the run names none of a kind, or the ledger lacks it),
  /// stored_document_unreadable (this program cannot read it any more).
  Result<RunBasis> basis_of(const db::RunRecord& run);

 private:
  template <class Value, class Parse>
  Result<std::shared_ptr<const Value>> parsed(std::map<Digest, std::shared_ptr<const Value>>& known,
                                              const Digest& digest, const std::string& role, Parse parse);
  Result<std::string> text_of(const Digest& digest, const std::string& role);
  Result<std::shared_ptr<const measure::Model>> model(const Digest& digest);

  db::Reader& reader_;
  std::map<Digest, std::shared_ptr<const measure::Model>> models_;
  std::map<Digest, std::shared_ptr<const limits::Sheet>> sheets_;
  std::map<Digest, std::shared_ptr<const measure::PhantomCertificate>> phantoms_;
  std::map<Digest, std::shared_ptr<const measure::AdapterCertificate>> adapters_;
};

/// The captures of a run in the order in which they were made, whatever kinds there are.
/// Errors: captures_not_kept (the run has none), capture_pruned, capture_damaged, capture_malformed, capture_twice.
Result<measure::Captures> stored_captures(db::Reader& reader, const db::RunRecord& run);

/// A reading with its judgement; no judgement where the sheet does not name the check.
struct DerivedReading {
  measure::Reading reading;
  std::optional<limits::Judgement> judgement;
  /// The word of the ledger for it: ok, not_ok, watch, record, none.
  std::string_view word() const;
};

/// A run as it comes out now.
struct DerivedRun {
  std::vector<DerivedReading> readings;  ///< in catalogue order
  std::string verdict;                   ///< pass, fail, void
  std::vector<std::string> failing;      ///< judged checks that are not ok or missing
};

/// Readings held against the sheet.
std::vector<DerivedReading> judged(std::vector<measure::Reading> readings, const limits::Sheet& sheet);
/// The verdict that these readings give the run. A run that went through: by the sheet. One that a person or the probe
/// ended: fail once a reading lies outside its acceptance limits, else void. One that a device ended: void. Which of
/// the last two it was is told from the stored verdict; a stored void without any reading outside could be either, and
/// then a reading that lies outside now counts as a fail.
DerivedRun with_verdict(std::vector<DerivedReading> readings, const RunBasis& basis, const db::RunRecord& stored);
/// evaluate() and judge() over stored captures, with these certificates.
DerivedRun derive(const RunBasis& basis, const measure::Certificates& certificates, const measure::Captures& captures,
                  const db::RunRecord& stored);

}  // namespace probewright::trace
