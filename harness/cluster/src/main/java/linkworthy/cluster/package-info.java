/**
 * The same work units on Apache Spark. The driver holds the results folder, sends the study, its
 * models, pictures and plugins to the executors by content, has them run stretches of the plan and
 * write the rows to a Hadoop file system, and puts these together in the canonical order.
 *
 * <p>What must stay fixed: a run here gives the very bytes of {@code trials.csv} that a run on one
 * machine gives, whatever the number of partitions, and whatever is retried, lost or run twice. So
 * nothing that a task computes may depend on where or when it runs; a part counts only once it
 * stands whole under its final name, and all files of that name hold the same rows.
 */
@NullMarked
package linkworthy.cluster;

import org.jspecify.annotations.NullMarked;
