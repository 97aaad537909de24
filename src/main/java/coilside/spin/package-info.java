/**
 * What spins do, pure: rotations by pulses, relaxation, steady states, echoes, thermal
 * magnetisation, noise and ringing of a coil. Start at {@link coilside.spin.Magnetisation} and
 * {@link coilside.spin.BlochPulse}.
 *
 * <p>Conventions, here once: rotating frame of the carrier, magnetisation relative to its
 * equilibrium M0 = 1 along z. With offset f (Larmor frequency above the carrier, Hz), nutation rate
 * n (Hz) and pulse phase p (rad), M turns as dM/dt = Omega x M, Omega = 2 pi (n cos p, n sin p, f),
 * so that the transverse part m = Mx + i My turns as exp(+2 pi i f t), the signal package's sign. A
 * short 90-degree pulse of phase 0 turns (0, 0, 1) into (0, -1, 0): m = -i exp(i p). Relaxation:
 * transverse with T2, longitudinal with T1 towards 1. Texts that turn the other way (Torrey 1949;
 * Bloch 1946 with negative rotations) follow by the sign of My.
 *
 * <p>Threads: values are immutable and methods keep no state. May import: quantity.
 */
package coilside.spin;
