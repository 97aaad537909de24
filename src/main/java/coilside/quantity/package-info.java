/**
 * Values with standard uncertainty, units and how they are read and written, constants, nuclei.
 * Start at {@link coilside.quantity.Measured}; {@link coilside.quantity.Quantities} reads what
 * people type, {@link coilside.quantity.ConciseFormat} writes what they read.
 *
 * <p>Threads: values are immutable and static methods keep no state: any thread.
 *
 * <p>May import: the JDK only.
 */
package coilside.quantity;
