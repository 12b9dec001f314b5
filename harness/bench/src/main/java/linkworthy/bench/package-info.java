/** Benchmarks: how fast each stage and a whole study are. */
@NullMarked
package linkworthy.bench;

import org.jspecify.annotations.NullMarked;
