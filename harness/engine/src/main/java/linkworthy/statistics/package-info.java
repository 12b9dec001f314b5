/**
 * What may be concluded: intervals, paired comparisons and their corrections.
 *
 * <p>What must stay fixed: replicates are nested in pictures and never counted as independent
 * samples of pictures; codecs are compared on the same noise; where the evidence is too thin for a
 * number, the number is NaN ('n/a' in tables) and never a width of zero. Distributions come from
 * Apache Commons Statistics.
 */
@NullMarked
package linkworthy.statistics;

import org.jspecify.annotations.NullMarked;
