/** What may be concluded: intervals, paired comparisons and their corrections. */
@NullMarked
package linkworthy.statistics;

import org.jspecify.annotations.NullMarked;
