/**
 * Values with standard uncertainty, units and their formatting, constants, nuclei.
 *
 * <p>May import: the JDK only.
 */
package coilside.quantity;
