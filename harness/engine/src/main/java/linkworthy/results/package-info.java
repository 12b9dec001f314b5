/** The record: the results folder, its files and their columns. */
@NullMarked
package linkworthy.results;

import org.jspecify.annotations.NullMarked;
