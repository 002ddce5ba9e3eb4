#pragma once
#include <QString>

#include "station/base/problem.h"

namespace probewright::windows {

/// Problems in the language of the screen. The English of station/base is the source of the translation, and the
/// problem's id tells apart sentences that are the same in English (context "Problem" of languages/tables_*.ts).

/// What is wrong, one sentence with a full stop, with the place before it where there is one: "Nest 2: the lid ...".
QString what_words(const Problem& problem);
/// What can be done about it, one sentence with a full stop.
QString remedy_words(const Problem& problem);
/// Both.
QString problem_words(const Problem& problem);

/// A place that a problem names, such as "phantom of nest 2".
QString place_words(const std::string& where);

}  // namespace probewright::windows
