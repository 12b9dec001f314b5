/**
 * What hurts a picture: noise processes, the model files that parametrise them, and the random
 * streams they draw from.
 *
 * <p>What must stay fixed: a draw depends on its address only (study seed, picture, model
 * fingerprint, severity, replicate, purpose), never on codec, thread or order; only strict
 * arithmetic; the errors of a packet depend on its number only, not on the packets of a codec;
 * every severity can be said as an equivalent noise variance. A process that gives other numbers
 * than before counts its revision up.
 *
 * <p>A {@link linkworthy.noise.NoiseProcess} is code; a {@link linkworthy.noise.NoiseModel} is a
 * process with its parameters set, read from a YAML file with these keys and no others:
 *
 * <ul>
 *   <li>{@code id}: lower-case letters, digits and hyphens, starting with a letter, at most 64
 *   <li>{@code version}: whole number from 1, counted up when the model changes
 *   <li>{@code process}: id of the noise process
 *   <li>{@code acts-on}: one or several of {@code samples}, {@code packets}, {@code bits}, the
 *       usual place first, as far as the process allows
 *   <li>{@code parameters}: optional; numbers, or {@code true} and {@code false} for those of two
 *       states, by the process's parameter names; those left out take the process's defaults
 *   <li>{@code curve}, {@code trace}, or whatever settings the process has: a word, or a file
 *       beside the model whose content counts for the fingerprint
 *   <li>{@code severity}: one or several of the process's severity axes, {@code snr-db} and {@code
 *       variance} among them
 *   <li>{@code source}: where the numbers come from
 *   <li>{@code notes}: optional
 * </ul>
 *
 * <p>To add a model to the {@link linkworthy.noise.NoiseLibrary}: one file in {@code library/}, one
 * line in its {@code index.txt}. To add a process: one class, one line in {@code
 * META-INF/services}, one test that extends the contract test, one model file of its name with all
 * its axes and sites. To add an error curve: one constant of {@link linkworthy.noise.ErrorCurve}
 * with published rates in its test, one model file. The contract test asks the registry for the
 * process and compares what it does to pictures and packets with what it says.
 */
@NullMarked
package linkworthy.noise;

import org.jspecify.annotations.NullMarked;
