/**
 * What is played, as pure data: pulses, waits, receive windows, repeats, phase cycles.
 *
 * <p>May import: quantity.
 */
package coilside.shot;
