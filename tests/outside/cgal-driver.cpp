// Meshes one domain with CGAL's 2D mesher, for comparison with ours: same angle bound, same size field.
//
// Build: g++ -O3 -DNDEBUG -o cgal-driver cgal-driver.cpp -lgmp -lmpfr   (Debian: libcgal-dev)
// Run:   cgal-driver < domain.txt
// Reads: angle bound in degrees, largest size, growth, count of sources, then per source x y size;
//        count of points, then x y each; count of constraints, then two point numbers each;
//        count of seeds (a point in each hole), then x y each.
// Prints: vertices, triangles, CPU seconds of the whole (triangulation and refinement), peak resident kilobytes,
//         smallest angle in degrees.
#include <CGAL/Constrained_Delaunay_triangulation_2.h>
#include <CGAL/Delaunay_mesh_face_base_2.h>
#include <CGAL/Delaunay_mesh_size_criteria_2.h>
#include <CGAL/Delaunay_mesher_2.h>
#include <CGAL/Delaunay_mesh_vertex_base_2.h>
#include <CGAL/Exact_predicates_inexact_constructions_kernel.h>
#include <sys/resource.h>

#include <cmath>
#include <ctime>
#include <iostream>
#include <list>
#include <vector>

using Kernel = CGAL::Exact_predicates_inexact_constructions_kernel;
using VertexBase = CGAL::Delaunay_mesh_vertex_base_2<Kernel>;
using FaceBase = CGAL::Delaunay_mesh_face_base_2<Kernel>;
using Structure = CGAL::Triangulation_data_structure_2<VertexBase, FaceBase>;
using Triangulation = CGAL::Constrained_Delaunay_triangulation_2<Kernel, Structure>;
using Point = Triangulation::Point;

struct Source {
  double x, y, size;
};

// The size field of our mesher: least of the largest size and size + growth * distance over the sources.
struct SizeField {
  double most = 0, growth = 0;
  std::vector<Source> sources;
  double operator()(double x, double y) const {
    double h = most;
    for (const Source& s : sources) h = std::min(h, s.size + growth * std::hypot(x - s.x, y - s.y));
    return h;
  }
};

static SizeField field;

// CGAL's size criterion with the bound taken at the centroid of the triangle.
template <class Cdt>
class GradedCriteria : public CGAL::Delaunay_mesh_size_criteria_2<Cdt> {
  using Base = CGAL::Delaunay_mesh_size_criteria_2<Cdt>;

 public:
  using typename Base::Face_handle;
  using typename Base::Quality;
  explicit GradedCriteria(double bound) : Base(bound, 0) {}
  class Is_bad {
    double bound_;

   public:
    explicit Is_bad(double bound) : bound_(bound) {}
    CGAL::Mesh_2::Face_badness operator()(const Quality q) const {
      if (q.size() > 1) return CGAL::Mesh_2::IMPERATIVELY_BAD;
      return q.sine() < bound_ ? CGAL::Mesh_2::BAD : CGAL::Mesh_2::NOT_BAD;
    }
    CGAL::Mesh_2::Face_badness operator()(const Face_handle& f, Quality& q) const {
      const Point a = f->vertex(0)->point(), b = f->vertex(1)->point(), c = f->vertex(2)->point();
      double ab = CGAL::squared_distance(a, b), bc = CGAL::squared_distance(b, c), ca = CGAL::squared_distance(c, a);
      const double twice = 2 * CGAL::area(a, b, c);
      const double longest = std::max({ab, bc, ca}), shortest = std::min({ab, bc, ca});
      const double middle = ab + bc + ca - longest - shortest;
      const double h = field((a.x() + b.x() + c.x()) / 3, (a.y() + b.y() + c.y()) / 3);
      q.second = longest / (h * h);
      if (q.second > 1) {
        q.first = 1;
        return CGAL::Mesh_2::IMPERATIVELY_BAD;
      }
      q.first = twice * twice / (longest * middle);
      return q.first < bound_ ? CGAL::Mesh_2::BAD : CGAL::Mesh_2::NOT_BAD;
    }
  };
  Is_bad is_bad_object() const { return Is_bad(this->bound()); }
};

template <class Criteria>
void refine(Triangulation& cdt, const std::list<Point>& seeds, const Criteria& criteria) {
  CGAL::Delaunay_mesher_2<Triangulation, Criteria> mesher(cdt, criteria);
  mesher.set_seeds(seeds.begin(), seeds.end(), false);
  mesher.refine_mesh();
}

int main() {
  double angle;
  std::size_t count;
  std::cin >> angle >> field.most >> field.growth >> count;
  field.sources.resize(count);
  for (Source& s : field.sources) std::cin >> s.x >> s.y >> s.size;
  std::cin >> count;
  std::vector<Point> points(count);
  for (Point& p : points) std::cin >> p;
  std::size_t constraints;
  std::cin >> constraints;
  std::vector<std::pair<int, int>> ends(constraints);
  for (auto& e : ends) std::cin >> e.first >> e.second;
  std::cin >> count;
  std::list<Point> seeds;
  for (std::size_t i = 0; i < count; i++) {
    Point p;
    std::cin >> p;
    seeds.push_back(p);
  }

  const std::clock_t start = std::clock();
  Triangulation cdt;
  std::vector<Triangulation::Vertex_handle> handles;
  for (const Point& p : points) handles.push_back(cdt.insert(p));
  for (const auto& e : ends) cdt.insert_constraint(handles[e.first], handles[e.second]);
  const double bound = std::pow(std::sin(angle * CGAL_PI / 180), 2);
  if (field.sources.empty()) {
    refine(cdt, seeds, CGAL::Delaunay_mesh_size_criteria_2<Triangulation>(bound, field.most));
  } else {
    refine(cdt, seeds, GradedCriteria<Triangulation>(bound));
  }
  const double seconds = double(std::clock() - start) / CLOCKS_PER_SEC;

  std::size_t triangles = 0;
  double least = 180;
  for (auto f : cdt.finite_face_handles()) {
    if (!f->is_in_domain()) continue;
    triangles++;
    for (int i = 0; i < 3; i++) {
      const Point a = f->vertex(i)->point(), b = f->vertex((i + 1) % 3)->point(), c = f->vertex((i + 2) % 3)->point();
      const auto u = b - a, w = c - a;
      least = std::min(least, std::atan2(u.x() * w.y() - u.y() * w.x(), u * w) * 180 / CGAL_PI);
    }
  }
  rusage usage;
  getrusage(RUSAGE_SELF, &usage);
  std::cout << cdt.number_of_vertices() << ' ' << triangles << ' ' << seconds << ' ' << usage.ru_maxrss << ' ' << least
            << '\n';
}
