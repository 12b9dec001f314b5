/** A codec that waits to be let through, as a plugin for the tests on a real cluster. */
@NullMarked
package linkworthy.cluster.gate;

import org.jspecify.annotations.NullMarked;
