#include "station/windows/words/problem_words.h"

#include <QCoreApplication>

#include "station/base/problem_table.h"
#include "station/windows/words/filled.h"
#include "station/windows/words/said_words.h"

namespace probewright::windows {
namespace {

QString argument_of(const Problem& problem, const QString& name) {
  for (const auto& [key, value] : problem.arguments)
    if (name == QLatin1String(key.c_str())) return said(value);
  return {};
}

/// `english` as the table has it. Its views end with a zero byte: they are literals.
QString translated(std::string_view english, const Problem& problem) {
  const QString sentence = QCoreApplication::translate("Problem", english.data(), problem.id.c_str());
  return filled(sentence, [&](const QString& name) { return argument_of(problem, name); });
}

}  // namespace

QString place_words(const std::string& where) { return said(where); }

QString what_words(const Problem& problem) {
  const ProblemRow* row = find_problem(problem.id);
  const QString what = row ? translated(row->what, problem) : QString::fromStdString(problem.id);
  // "line" and "scan" say only which part of the program speaks.
  if (problem.where.empty() || problem.where == "line" || problem.where == "scan") return as_sentence(what);
  return as_sentence(place_words(problem.where) + QStringLiteral(": ") + what);
}

QString remedy_words(const Problem& problem) {
  const ProblemRow* row = find_problem(problem.id);
  return row ? as_sentence(translated(row->remedy, problem)) : as_sentence(QString::fromStdString(problem.remedy()));
}

QString problem_words(const Problem& problem) { return what_words(problem) + QLatin1Char(' ') + remedy_words(problem); }

}  // namespace probewright::windows
