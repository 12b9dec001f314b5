/**
 * What the record means for a choice: which codecs meet stated needs and how surely, how far apart
 * two rate-quality curves lie, and what moved between two runs.
 *
 * <p>What must stay fixed: a decision is made from recorded rows alone; nothing is decided without
 * a bound, the bounds of one table are corrected for its size, and what the evidence leaves open is
 * called undecided; pictures, not trials, are what is sampled.
 */
@NullMarked
package linkworthy.decision;

import org.jspecify.annotations.NullMarked;
