#include "engine/course/sampling.h"
namespace lw {
Result<Centreline> join_points(const Course&) { return Error{"course.points_mm", "", "not built yet"}; }
}  // namespace lw
