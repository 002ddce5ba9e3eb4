#pragma once
#include <string>
#include <vector>

#include "limits/sheet.h"

/// A small sheet with one check of each form, as lines, so that a test can change one line and name the place.
std::vector<std::string> sample_lines();
std::string joined(const std::vector<std::string>& lines);
/// The sample with line `number` (1-based) replaced.
std::string sample_with(int number, const std::string& line);
/// The sheet of a text that must be without faults; fails the test otherwise.
probewright::limits::Sheet sheet_of(const std::string& text);
/// The sample, read.
probewright::limits::Sheet sample_sheet();
