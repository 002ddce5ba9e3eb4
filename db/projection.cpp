#include "db/projection.h"

#include <algorithm>
#include <array>

#include "db/hex.h"
#include "station/base/numbers.h"

namespace probewright::db {
namespace {

using enum Source;

constexpr std::array document_columns = std::to_array<ProjectedColumn>({
    {"entry", entry_number, ""},
    {"digest", digest, "digest"},
    {"kind", text, "kind"},
    {"name", text, "name"},
    {"revision", text, "revision"},
    {"size", integer, "size"},
    {"text", digested_text, "digest"},
});
constexpr std::array signature_columns = std::to_array<ProjectedColumn>({
    {"entry", entry_number, ""},
    {"document", digest, "document"},
    {"signer", text, "signer"},
    {"role", text, "role"},
    {"meaning", text, "meaning"},
    {"public_key", text, "public_key"},
    {"signature", text, "signature"},
});
constexpr std::array document_state_columns = std::to_array<ProjectedColumn>({
    {"entry", entry_number, ""},
    {"document", digest, "document"},
    {"state", text, "state"},
    {"from_time", text, "from"},
});
constexpr std::array run_opened_columns = std::to_array<ProjectedColumn>({
    {"run", entry_number, ""},
    {"serial", text, "serial"},
    {"purpose", text, "purpose"},
    {"emulated", flag, "emulated"},
    {"lot", text, "lot"},
    {"model", text, "model"},
    {"nest", integer, "nest"},
    {"station", text, "station"},
    {"operator", text, "operator"},
    {"try_number", integer, "try_number"},
    {"software_version", text, "software_version"},
    {"software_commit", text, "software_commit"},
    {"compiler", text, "compiler"},
    {"ambient_temperature_c", decimal, "ambient_temperature_c"},
});
constexpr std::array run_document_columns = std::to_array<ProjectedColumn>({
    {"run", entry_number, ""},
    {"place", place, ""},
    {"role", text, "role"},
    {"document", digest, "digest"},
});
constexpr std::array run_device_columns = std::to_array<ProjectedColumn>({
    {"run", entry_number, ""},
    {"place", place, ""},
    {"role", text, "role"},
    {"identity", text, "identity"},
    {"firmware", text, "firmware"},
    {"certificate_number", text, "certificate_number"},
    {"certificate", maybe_digest, "certificate"},
});
constexpr std::array run_closed_columns = std::to_array<ProjectedColumn>({
    {"run", integer, "run"},
    {"entry", entry_number, ""},
    {"verdict", text, "verdict"},
    {"cause", text, "cause"},
    {"cause_words", text, "cause_words"},
    {"failing", words, "failing"},
    {"provisional", flag, "provisional"},
    {"readings", integer, "readings"},
    {"captures", integer, "captures"},
    {"proof", digest, "proof"},
});
constexpr std::array pruned_columns = std::to_array<ProjectedColumn>({
    {"capture", item, ""},
    {"entry", entry_number, ""},
});

constexpr std::array carried_try_columns = std::to_array<ProjectedColumn>({
    {"serial", text, "serial"},
    {"purpose", text, "purpose"},
    {"tries", integer, "tries"},
    {"entry", entry_number, ""},
    {"place", place, ""},
});

constexpr std::array entry_about_columns = std::to_array<ProjectedColumn>({
    {"entry", entry_number, ""},
    {"subject", about_subject, ""},
    {"name", about_name, ""},
});
constexpr std::array subjects = std::to_array<const char*>({"lot", "person", "serial"});

constexpr std::array tables = std::to_array<ProjectedTable>({
    {"document", "document", "", "entry", document_columns},
    {"signature", "document_signed", "", "entry", signature_columns},
    {"document_state", "document_state", "", "entry", document_state_columns},
    {"run_opened", "run_opened", "", "run", run_opened_columns},
    {"run_document", "run_opened", "documents", "run", run_document_columns},
    {"run_device", "run_opened", "devices", "run", run_device_columns},
    {"run_closed", "run_closed", "", "entry", run_closed_columns},
    {"pruned", "prune", "captures", "entry", pruned_columns},
    {"carried_try", "tries_carried", "tries", "entry", carried_try_columns, 2},
    {"entry_about", "", "", "entry", entry_about_columns, 3},
});

std::optional<Cell> digest_cell(const Body& member) {
  const auto bytes = member.string() ? digest_from_hex(*member.string()) : std::nullopt;
  if (!bytes) return std::nullopt;
  return Bytes(bytes->begin(), bytes->end());
}

std::optional<Cell> decimal_cell(const Body& member) {
  if (member.is_null()) return Cell{nullptr};
  const auto value = member.string() ? parse_double(*member.string()) : std::nullopt;
  return value ? std::optional<Cell>{*value} : std::nullopt;
}

std::optional<Cell> words_cell(const Body& member) {
  if (!member.array()) return std::nullopt;
  std::string joined;
  for (const Body& word : *member.array()) {
    if (!word.string()) return std::nullopt;
    joined += (joined.empty() ? "" : ", ") + *word.string();
  }
  return joined;
}

std::optional<Cell> member_cell(Source source, const Body& member) {
  switch (source) {
    case text:
      return member.string() ? std::optional<Cell>{*member.string()} : std::nullopt;
    case integer:
      return member.integer() ? std::optional<Cell>{*member.integer()} : std::nullopt;
    case flag:
      return member.boolean() ? std::optional<Cell>{std::int64_t{*member.boolean()}} : std::nullopt;
    case decimal:
      return decimal_cell(member);
    case maybe_digest:
      return member.is_null() ? std::optional<Cell>{nullptr} : digest_cell(member);
    case digest:
      return digest_cell(member);
    case words:
      return words_cell(member);
    default:
      return std::nullopt;
  }
}

std::optional<Cell> cell(const ProjectedColumn& column, std::int64_t entry, std::int64_t at, const Body& from,
                         const std::string& digested) {
  switch (column.source) {
    case entry_number:
      return entry;
    case place:
      return at;
    case item:
      return from.integer() ? std::optional<Cell>{*from.integer()} : std::nullopt;
    case digested_text:
      return digested;
    default:
      break;
  }
  const Body* member = from.find(column.key);
  return member ? member_cell(column.source, *member) : std::nullopt;
}

std::optional<std::vector<Cell>> project_row(const ProjectedTable& table, std::int64_t entry, std::int64_t at,
                                             const Body& from, const std::string& digested) {
  std::vector<Cell> row;
  for (const ProjectedColumn& column : table.columns) {
    auto value = cell(column, entry, at, from, digested);
    if (!value) return std::nullopt;
    row.push_back(*std::move(value));
  }
  return row;
}

std::string column_list(const ProjectedTable& table) {
  std::string list;
  for (const ProjectedColumn& column : table.columns) list += (list.empty() ? "" : ", ") + std::string{column.name};
  return list;
}

/// The column that keeps the rows of one entry in the order of their list.
const char* order_of(const ProjectedTable& table) {
  for (const ProjectedColumn& column : table.columns)
    if (column.source == place || column.source == item || column.source == about_subject) return column.name;
  return table.entry_key;
}

}  // namespace

std::span<const ProjectedTable> projected_tables() { return tables; }

std::span<const ProjectedTable> projected_tables_at(std::int64_t step) {
  const auto newer = [step](const ProjectedTable& table) { return table.since > step; };
  const auto end = std::find_if(tables.begin(), tables.end(), newer);  // later steps stand at the end
  return {tables.begin(), end};
}

bool makes_rows(const ProjectedTable& table, std::string_view kind) {
  if (*table.kind != '\0') return kind == table.kind;
  return kind != "run_opened" && kind != "run_closed";
}

bool is_projected(std::string_view kind) {
  return std::any_of(tables.begin(), tables.end(), [kind](const ProjectedTable& table) { return kind == table.kind; });
}

std::string shown(const Cell& cell) {
  struct Words {
    std::string operator()(std::nullptr_t) const { return "nothing"; }
    std::string operator()(std::int64_t value) const { return std::to_string(value); }
    std::string operator()(double value) const { return shortest(value); }
    std::string operator()(const std::string& value) const {
      return '"' + (value.size() > 80 ? value.substr(0, 80) + "..." : value) + '"';
    }
    std::string operator()(const Bytes& value) const { return hex(value); }
  };
  return std::visit(Words{}, cell);
}

std::optional<std::vector<std::vector<Cell>>> project(const ProjectedTable& table, std::int64_t entry, const Body& data,
                                                      const std::string& digested) {
  std::vector<std::vector<Cell>> rows;
  if (*table.kind == '\0') {
    for (const char* subject : subjects) {
      const Body* name = data.find(subject);
      if (name && name->string() && !name->string()->empty())
        rows.push_back({entry, std::string{subject}, *name->string()});
    }
    return rows;
  }
  const auto take = [&](std::int64_t at, const Body& from) {
    auto row = project_row(table, entry, at, from, digested);
    if (row) rows.push_back(*std::move(row));
    return row.has_value();
  };
  if (*table.list == '\0') return take(0, data) ? std::optional{rows} : std::nullopt;
  const Body* list = data.find(table.list);
  if (!list || !list->array()) return std::nullopt;
  for (const Body& each : *list->array())
    if (!take(static_cast<std::int64_t>(rows.size()), each)) return std::nullopt;
  return rows;
}

std::string insert_sql(const ProjectedTable& table) {
  std::string marks;
  for (std::size_t i = 0; i < table.columns.size(); ++i) marks += i == 0 ? "?" : ", ?";
  return "INSERT INTO " + std::string{table.table} + "(" + column_list(table) + ") VALUES (" + marks + ")";
}

std::string select_sql(const ProjectedTable& table) {
  return "SELECT " + column_list(table) + " FROM " + table.table + " WHERE " + table.entry_key + " = ? ORDER BY " +
         order_of(table);
}

}  // namespace probewright::db
