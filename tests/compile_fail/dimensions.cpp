// Each CASE above 0 must not compile, for the reason in its comment. CASE 0 must.
#include "capsigh/models/henry.hpp"
#include "capsigh/quantity/uncertain.hpp"
#include "capsigh/quantity/units.hpp"

using namespace capsigh;

void attempt(Temperature t, Pressure p, GaugePressure g, Volume v, Fraction f, MassDensity rho) {
  (void)(t - t);
  (void)(p + p);
  (void)absolute(g, p);
  (void)(f * p);
  (void)ThreeTermHenry{}(t, rho, p);
#if CASE == 1  // a point cannot be scaled
  (void)(2.0 * t);
#elif CASE == 2   // two points cannot be added
  (void)(t + t);
#elif CASE == 3   // pressure and volume cannot be added
  (void)(p + v);
#elif CASE == 4   // a gauge reading is no absolute pressure
  Pressure q = g;
  (void)q;
#elif CASE == 5   // a gauge reading and a pressure cannot change places
  (void)absolute(p, g);
#elif CASE == 6   // a plain number is no pressure
  Pressure q = 2.3;
  (void)q;
#elif CASE == 7   // a law takes its quantities in their dimensions
  (void)ThreeTermHenry{}(p, rho, p);
#elif CASE == 8   // a difference is no point
  Temperature q = t - t;
  (void)q;
#elif CASE == 9   // the doubt of a temperature is a difference
  Uncertain<Temperature> q{t, t, Shape::normal, 0};
  (void)q;
#elif CASE == 10  // a point and a number cannot be compared
  (void)(t > 277.15);
#endif
}
