/**
 * The plan and its trials: a work unit takes one picture through one realisation of noise and every
 * codec of the study.
 */
@NullMarked
package linkworthy.trial;

import org.jspecify.annotations.NullMarked;
