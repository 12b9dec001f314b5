/**
 * The plan and its trials. A work unit is one picture, one impairment, one severity and one
 * replicate, and evaluates every codec of the study on the same noise.
 *
 * <p>What must stay fixed: a unit depends on the study, the picture and its own key and nothing
 * else, so it gives the same rows in any order, on any thread, on any machine; units are numbered
 * in the canonical order of the results.
 */
@NullMarked
package linkworthy.trial;

import org.jspecify.annotations.NullMarked;
