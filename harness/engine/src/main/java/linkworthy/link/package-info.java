/** The way: how coded units become packets, and what a packet costs. */
@NullMarked
package linkworthy.link;

import org.jspecify.annotations.NullMarked;
