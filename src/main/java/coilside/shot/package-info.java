/**
 * What is played, as pure data: pulses, waits, receive windows, repeats, phase cycles. Start at
 * {@link coilside.shot.Shot}; {@link coilside.shot.Shots} builds the usual experiments.
 *
 * <p>Threads: everything is immutable. May import: quantity.
 */
package coilside.shot;
