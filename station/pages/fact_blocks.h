#pragma once
#include <string>
#include <utility>
#include <vector>

#include "station/pages/paper.h"

/// What reports have in common: their title, lines of facts, the seal. Private to pages. Main thread only.
namespace probewright::pages {

inline constexpr double body_size_mm = 3.1;   // 8.8 points
inline constexpr double small_size_mm = 2.7;  // for what is said beside

/// Adds blocks to the end.
void append(std::vector<Block>& to, std::vector<Block> blocks);

/// The large line at the top, made smaller where it is too long.
Block title_line(const std::string& text);

/// "name   value" lines; the names in grey, values wrapped, several lines where they have line feeds.
std::vector<Block> fact_lines(const std::vector<std::pair<std::string, std::string>>& pairs);

/// Entry, hash, and what to type to compare. They stay together.
std::vector<Block> seal_blocks(const std::string& seal, long long entry, const std::string& verify_command);

/// The word PASS, FAIL, VOID or OPEN with its shape (disc, cross, bar, ring), and beside it why.
Block verdict_block(const std::string& verdict, const std::string& words, const std::string& why);

enum class Shape { disc, cross, bar, ring };
/// The shape that goes with "pass", "fail", "void"; a ring for what is open.
Shape shape_of(const std::string& verdict);
void draw_shape(const Canvas& canvas, Shape shape, QPointF centre_mm, double size_mm, QColor colour);

/// "2026-12-01 06:00" of "2026-12-01 06:00:00".
std::string minute_of(const std::string& local_text);

}  // namespace probewright::pages
