/**
 * What the measurements mean for a choice: which codecs meet stated needs and how surely, and how
 * far apart two rate-quality curves lie.
 *
 * <p>What must stay fixed: nothing is decided without a bound, the bounds of one table are
 * corrected for its size, and what the evidence leaves open is called undecided.
 */
@NullMarked
package linkworthy.decision;

import org.jspecify.annotations.NullMarked;
