// CGAL's Delaunay_mesher_2 as a peer of the mesher.
#include "peer.hpp"
#include <CGAL/Constrained_Delaunay_triangulation_2.h>
#include <CGAL/Delaunay_mesh_face_base_2.h>
#include <CGAL/Delaunay_mesh_size_criteria_2.h>
#include <CGAL/Delaunay_mesh_vertex_base_2.h>
#include <CGAL/Delaunay_mesher_2.h>
#include <CGAL/Exact_predicates_inexact_constructions_kernel.h>

namespace {

using Kernel = CGAL::Exact_predicates_inexact_constructions_kernel;
using Storage =
    CGAL::Triangulation_data_structure_2<CGAL::Delaunay_mesh_vertex_base_2<Kernel>, CGAL::Delaunay_mesh_face_base_2<Kernel>>;
using Triangulation = CGAL::Constrained_Delaunay_triangulation_2<Kernel, Storage>;
using Criteria = CGAL::Delaunay_mesh_size_criteria_2<Triangulation>;

std::vector<double> xy, limits;
std::vector<int32_t> segments;

/// Points, segments between them, and the two limits: longest edge, smallest angle in radians.
std::string load(std::istream &words) {
  std::string path;
  words >> path;
  Arrays file(path);
  const auto sizes = file.next<int32_t>(2);
  xy = file.next<double>(2 * sizes[0]);
  segments = file.next<int32_t>(2 * sizes[1]);
  limits = file.next<double>(2);
  return Answer().add("points", sizes[0]);
}

void build(Triangulation &tri) {
  std::vector<Triangulation::Vertex_handle> vertices;
  for (size_t i = 0; i < xy.size(); i += 2) vertices.push_back(tri.insert({xy[i], xy[i + 1]}));
  for (size_t s = 0; s < segments.size(); s += 2)
    tri.insert_constraint(vertices[segments[s]], vertices[segments[s + 1]]);
  const double sine = std::sin(limits[1]);
  CGAL::refine_Delaunay_mesh_2(tri, Criteria(sine * sine, limits[0]));
}

/// Smallest angle in degrees; longest edge as a share of the limit.
Answer &judge(const Triangulation &tri, Answer &answer) {
  double smallest = 180, longest2 = 0;
  for (const auto face : tri.finite_face_handles()) {
    for (int k = 0; k < 3; k++) {
      const auto u = face->vertex((k + 1) % 3)->point() - face->vertex(k)->point();
      const auto v = face->vertex((k + 2) % 3)->point() - face->vertex(k)->point();
      smallest = std::min(smallest, std::atan2(u.x() * v.y() - u.y() * v.x(), u * v) * 180 / M_PI);
      longest2 = std::max(longest2, u.squared_length());
    }
  }
  return answer.add("angle", smallest).add("longest", std::sqrt(longest2) / limits[0]);
}

std::string mesh(std::istream &words) {
  const double ms = meanMs(words, [] {
    Triangulation tri;
    build(tri);
  });
  Triangulation tri;
  build(tri);
  Answer answer;
  return judge(tri, answer.add("ms", ms).add("triangles", tri.number_of_faces()));
}

} // namespace

int main() {
  serve({{"load", load}, {"mesh", mesh}});
}
