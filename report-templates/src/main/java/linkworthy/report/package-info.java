/** Page models in, HTML out: knows nothing of trials. */
@NullMarked
package linkworthy.report;

import org.jspecify.annotations.NullMarked;
