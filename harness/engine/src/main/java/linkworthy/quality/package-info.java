/**
 * The judge: measures that compare a decoded picture with the clean one.
 *
 * <p>What must stay fixed: the reference is the clean picture, never the noisy one; what depends on
 * the clean picture alone is computed once; the same pair of pictures gives the same bits on any
 * machine, thread and order.
 *
 * <p>One more measure is a class that implements {@link linkworthy.quality.QualityMeasure}, a line
 * in {@code META-INF/services/linkworthy.quality.QualityMeasure}, a test that extends {@code
 * QualityContractTest}, and a line in the handbook.
 */
@NullMarked
package linkworthy.quality;

import org.jspecify.annotations.NullMarked;
