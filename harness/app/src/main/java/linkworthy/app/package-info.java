/**
 * The command line: arguments become a request, a runner does the work. The only place that prints.
 */
@NullMarked
package linkworthy.app;

import org.jspecify.annotations.NullMarked;
