// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <cstddef>
#include <string>
#include <vector>

namespace chronodrome::simulation {

/// Activation times of atrium and ventricle whose reading is known on paper. Milliseconds, since textbooks
/// and hand calculations give them so.
struct GoldenSequence {
  std::string name;
  std::vector<double> atrial_ms, ventricular_ms;
};

/// A every 200, V 50 later: all conducted.
GoldenSequence golden_one_to_one(std::size_t beats);
/// A every 200; every second one conducts in 60.
GoldenSequence golden_two_to_one(std::size_t atrial_beats);
/// 4:3 periods at 200: delays 80, 120, 140, then a dropped beat; pause 340.
GoldenSequence golden_wenckebach(std::size_t periods);
/// 3:2 with a fixed delay of 60 at 200; pause 400.
GoldenSequence golden_fixed_delay_block(std::size_t periods);
/// AvNode with its defaults (60 + 200 exp(-r/50), blocked to 30) at a constant cycle: 1:1 at 200, 8:7 at 170,
/// 6:5 at 165, 5:4 at 160, 4:3 at 150, 3:2 at 130, 2:1 at 100; 1:1 is lost at 179.3147.
GoldenSequence golden_node(double cycle_ms, std::size_t atrial_beats);
/// A every 200, V at 100 + 470 k: no A conducts, phases uniform.
GoldenSequence golden_dissociation();
/// V at 50 250 450 580 850 1050, A every 200: premature beat at 580, full compensatory pause.
GoldenSequence golden_compensatory_pause();
/// V at 50 250 350 450, A every 200: an interpolated premature beat at 350.
GoldenSequence golden_interpolated();
/// A at 0 200 400 520 730 930, each conducted in 50: premature at 520, the sinus node reset.
GoldenSequence golden_reset();
/// AA 200 200 400 200: exit block, second degree type II, k = 2. Atrium only, as the next two.
GoldenSequence golden_exit_block();
/// AA 230 215 205 380, twice: exit block type I; hidden sinus cycle 206.
GoldenSequence golden_sinus_wenckebach();
/// AA 200 200 530 200 after a run of 200: a pause, no multiple of the cycle.
GoldenSequence golden_sinus_pause();

} // namespace chronodrome::simulation
