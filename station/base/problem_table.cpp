#include "station/base/problem_table.h"

#include <algorithm>
#include <array>

namespace probewright {
namespace {

using enum ProblemKind;

// The one place for the English words of every problem. {names} are filled from the problem's arguments.
constexpr std::array rows = std::to_array<ProblemRow>({
    // --- base
    {"file_unreadable", refused_input, "cannot read the file: {reason}", "check the path and its permissions"},
    {"file_too_large", refused_input, "the file has {size} bytes; at most {bound} are read",
     "check that this is the right file"},
    {"number_malformed", refused_input, "\"{text}\" is not a number",
     "write digits with a point for decimals, such as 655.0"},
    {"number_not_finite", refused_input, "\"{text}\" is not a finite number", "write the number itself"},
    {"integer_malformed", refused_input, "\"{text}\" is not a whole number", "write digits only, such as 4"},
    {"unit_unknown", refused_input, "there is no unit \"{unit}\"", "did you mean \"{nearest}\"?"},
    {"unit_missing", refused_input, "the number has no unit",
     "write it with its unit, here {unit} or a multiple of it"},
    {"unit_mismatch", refused_input, "\"{unit}\" is {found}, but {wanted} belongs here",
     "write the number in {wanted_unit} or a multiple of it"},
    {"time_malformed", refused_input, "\"{text}\" is not a time", "write it in UTC like 2026-12-01T05:36:12.123456Z"},
    {"text_not_utf8", refused_input, "the text is not UTF-8 from here on", "save the file as UTF-8"},
    {"text_control_character", refused_input, "a control character stands in the text",
     "take it out; save the file as plain UTF-8 text"},
    {"body_malformed", ledger_trouble, "the bytes are not canonical JSON from offset {offset} on",
     "verify the ledger: the entry was damaged or not written by this program"},
    {"yaml_syntax", refused_input, "the YAML cannot be read: {reason}", "mend the line; what follows it was not read"},
    {"yaml_empty", refused_input, "the document is empty", "check that this is the right file"},
    {"yaml_several_documents", refused_input, "a second document begins here",
     "put each document in a file of its own"},
    {"yaml_alias", refused_input, "an alias (*) is not allowed", "write the value out"},
    {"yaml_anchor", refused_input, "an anchor (&) is not allowed", "take it out"},
    {"yaml_tag", refused_input, "the tag {tag} is not allowed", "take it out"},
    {"yaml_too_deep", refused_input, "the document is nested more than {bound} deep",
     "check that this is the right file"},
    {"yaml_key_not_text", refused_input, "a key must be a single word or text", "write \"key: value\""},
    {"yaml_duplicate_key", refused_input, "the key \"{key}\" stands here again; it stands first in line {line}",
     "keep one of the two"},
    {"yaml_missing_key", refused_input, "the key \"{key}\" is missing", "add it"},
    {"yaml_unknown_key", refused_input, "there is no key \"{key}\" here", "take it out, or check the indentation"},
    {"yaml_unknown_key_near", refused_input, "there is no key \"{key}\" here", "did you mean \"{nearest}\"?"},
    {"yaml_wrong_kind", refused_input, "{wanted} belongs here, but {found} is written", "write {wanted}"},
    {"yaml_not_yes_no", refused_input, "\"{text}\" is neither yes nor no", "write yes or no"},
    {"csv_missing_column", refused_input, "the column \"{column}\" is missing", "add it to the header line"},
    {"csv_unknown_column", refused_input, "there is no use for a column \"{column}\"",
     "take it out, or mend its name in the header line"},
    {"csv_duplicate_column", refused_input, "the column \"{column}\" stands twice", "keep one of the two"},
    {"csv_ragged", refused_input, "the line has {found} cells, the header {wanted}",
     "give every line as many cells as the header"},
    {"csv_not_a_number", refused_input, "\"{text}\" in column \"{column}\" is not a finite number",
     "write digits with a point for decimals, such as 655.0"},
    {"csv_empty", refused_input, "the table has no rows", "check that this is the right file"},
    {"csv_quote", refused_input, "a quotation mark is out of place",
     "put the whole cell in quotation marks and write each one inside it twice"},
    // --- measure
    // --- limits
    // --- wire
    // --- phantom
    // --- adapter
    // --- emulated
    // --- db
    // --- sequence
    {"configuration_missing", refused_input, "no configuration folder was found; tried: {places}",
     "name one with --config, or set PROBEWRIGHT_CONFIG"},
    {"station_not_found", refused_input, "no station file names the station '{station}'",
     "check --station and the files in this folder"},
    {"station_not_chosen", refused_input, "{count} stations stand here", "choose one with --station"},
    {"document_twice", refused_input, "the {kind} '{name}' stands in {other} too", "keep one of the two files"},
    {"model_without_sheet", refused_input, "no limit sheet is for the model {model}", "add its sheet to the folder sheets"},
    {"sheet_for_other_model", refused_input, "the sheet was written for another text of {model}, whose SHA-256 is {digest}",
     "review the sheet against the model and write this digest into it"},
    {"certificate_not_found", refused_input, "nest {nest} names the certificate {number}, which is not there",
     "put the certificate into the folder certificates, or correct the number"},
    {"station_nest_number", refused_input, "a nest's number is a whole number from 1 to {bound}", "correct the number"},
    {"station_nest_twice", refused_input, "nest {nest} stands here twice", "give each nest a number of its own"},
    {"station_port_twice", refused_input, "the port '{port}' stands here twice", "each device has a port of its own"},
    {"station_no_nest", refused_input, "the station has no nest", "name at least one nest with its two devices"},
    {"station_speed", refused_input, "a speed other than 1 is for emulated benches, from 0.1 to 1000",
     "write 'speed: 1', or 'emulated: yes' with the bench's own speed"},
    {"station_baud", refused_input, "{baud} is no usual rate of a serial line",
     "use the rate of the devices, 921600 as a rule"},
    {"station_zone", refused_input, "no time zone is called '{zone}'",
     "use a name of the tz database, e.g. Europe/Amsterdam"},
    {"station_name", refused_input, "a station's name has 1 to 40 letters, digits, '-', '_' or '.'",
     "choose such a name"},
    // --- trace
    // --- text
});

}  // namespace

std::span<const ProblemRow> problem_table() { return rows; }

const ProblemRow* find_problem(std::string_view id) {
  const auto row = std::find_if(rows.begin(), rows.end(), [id](const ProblemRow& r) { return r.id == id; });
  return row == rows.end() ? nullptr : &*row;
}

}  // namespace probewright
