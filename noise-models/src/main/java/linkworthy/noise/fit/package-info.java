/**
 * Noise models from measurements: burst losses from recorded fates of packets, sensor noise from
 * pictures.
 *
 * <p>What must stay fixed: every estimate comes with a standard error or says that it has none; the
 * model files written read back through {@link linkworthy.noise.NoiseModel}; only strict arithmetic
 * reaches a model file. To fit one more process: one class that estimates, one method of {@link
 * linkworthy.noise.fit.ModelFile}, and a test that recovers known values from simulated
 * measurements.
 */
@NullMarked
package linkworthy.noise.fit;

import org.jspecify.annotations.NullMarked;
