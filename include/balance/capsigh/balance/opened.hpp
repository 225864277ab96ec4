// An opened package in time, and closed again.
//
// Every gas relaxes to equilibrium with the air of the room by the one share f that is left to lose
// (models/escape.hpp): what is dissolved, and the gas that stayed in the headspace. Closed again,
// moles are conserved as before:
//
//   n_i = b_i(t) m_L + n_air,i + f (n_stay,i − n_air,i) + y_air,i ΔV (p_amb − p_v)/(Z R T)
//
// ΔV is the room that the liquid makes by shrinking while its gas leaves. At once (f = 1) this is
// all there was, less the headspace loss (into a package under vacuum air rushes besides); in the
// end (f = 0) it stands at ambient pressure under air.
#pragma once

#include "capsigh/balance/opening.hpp"
#include "capsigh/models/escape.hpp"

namespace capsigh {

/// What the open drink ends at: contents in equilibrium with air at ambient.
Contents flat_contents(const Medium& medium, const Opened& opened, Pressure ambient,
                       const Shares& air);

/// Contents with a share `left` to lose.
Contents contents_in_time(const Opened& opened, const Contents& flat, Fraction left);

/// What is inside once the package is closed again with `now` dissolved.
Filling closed_again(const Medium& medium, const Filling& filling, const ClosedState& state,
                     const Opened& opened, const Contents& now, Fraction left, Pressure ambient,
                     const Shares& air);

/// The coldest the gas of a headspace of this composition becomes when it expands from `before` to
/// ambient; `ratios` are c_p/c_v of the medium's gases.
Temperature cold_of_opening(Trace* trace, const Shares& shares,
                            const PerGas<CitedConstant<Fraction>>& ratios, Temperature t,
                            Pressure before, Pressure ambient);

}  // namespace capsigh
