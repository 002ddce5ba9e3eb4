#pragma once
#include <vector>

#include "station/windows/frame/text_page.h"

namespace probewright::windows {

/// What the program is, and what whoever relies on it must know. `version` as --version prints it.
std::vector<Passage> about_passages(const QString& version);

/// The cautions in the language of the screen.
QString caution_words();

}  // namespace probewright::windows
