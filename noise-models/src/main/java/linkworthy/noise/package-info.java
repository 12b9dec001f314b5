/**
 * What hurts a picture: noise processes, the model files that parametrise them, and the random
 * streams they draw from.
 *
 * <p>What must stay fixed: a draw depends on its address only (study seed, picture, model
 * fingerprint, severity, replicate, purpose), never on codec, thread or order; only strict
 * arithmetic; every severity can be said as an equivalent noise variance.
 *
 * <p>To add a process: one {@link linkworthy.noise.NoiseProcess}, one line in {@code
 * META-INF/services}, one model file in {@code library/}, one test that extends the contract test.
 */
@NullMarked
package linkworthy.noise;

import org.jspecify.annotations.NullMarked;
