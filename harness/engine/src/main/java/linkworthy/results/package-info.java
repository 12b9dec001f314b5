/**
 * The record: the results folder, its files and their columns.
 *
 * <p>What must stay fixed: {@code study.yaml}, {@code trials.csv} and {@code cells.csv} are the
 * same bytes for the same study on any machine; what differs from run to run stands in {@code
 * run.json} and {@code timings.csv}. A file is whole or not there; a table grows by whole work
 * units; nothing that the program did not write is ever removed.
 *
 * <p>Text files end their lines in LF, CSV included, where RFC 4180 has CRLF.
 *
 * <p>To add a column: one line in the table of its file and one where its row is read. The column
 * of a further quality measure comes by itself, behind the fixed ones.
 */
@NullMarked
package linkworthy.results;

import org.jspecify.annotations.NullMarked;
