/**
 * The answer: what may be said of whole records, such as whether two of them differ.
 *
 * <p>What must stay fixed: a decision is made from recorded rows alone; it is one of a few words,
 * of which one says that the evidence does not suffice; pictures, not trials, are what is sampled.
 */
@NullMarked
package linkworthy.decision;

import org.jspecify.annotations.NullMarked;
