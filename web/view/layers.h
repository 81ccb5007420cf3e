// What lies on the floor, from the bare surface up to the path of the drive.
#pragma once

#include "web/view/bench.h"

namespace lw::view {

/// Grid lines at a round step; returns that step, mm.
double draw_grid(ImDrawList& draw, const View& view, const panel::Theme& theme, float least_px);

/// The tape with its edge and its rounded corners; and small arrows on its left that point along the course.
void add_tape(Mesh& mesh, const LineShape& shape, const View& view, double width_mm,
              const panel::Theme& theme);
void add_arrows(Mesh& mesh, const Centreline& line, const View& view, double width_mm, ImU32 colour,
                float apart_px);

/// Where the course begins, and where an open one ends.
void draw_start(ImDrawList& draw, const Centreline& line, const View& view, double width_mm,
                const panel::Theme& theme, float unit);

/// The path of a drive, coloured by deviation over the scenario's limit, with a rim that sets it off from the
/// tape where the tape is wide enough to show on both sides.
void add_path(Mesh& mesh, const Path& path, const View& view, const Scenario& scenario, bool dark,
              float half);
/// The path of the kept choice, in its one colour.
void add_ghost(Mesh& mesh, const Path& path, const View& view, ImU32 colour, float half);

/// Where the drive ended and how; where it was farthest off the line.
void draw_marks(ImDrawList& draw, const panel::GoodDrive& good, const Path& path, const View& view,
                const panel::Theme& theme, float unit);

}  // namespace lw::view
