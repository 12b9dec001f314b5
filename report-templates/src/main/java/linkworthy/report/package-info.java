/**
 * Page models in, one self-contained HTML file out. Knows nothing of trials, studies or files.
 *
 * <p>What must stay fixed: a page loads nothing and is complete without its script ({@code
 * report.js}); the same model gives the same bytes under every locale; every text of the caller is
 * escaped by the template; a number that is not available is shown as {@code n/a}, never as a zero.
 * To add a section, add its figures to {@link linkworthy.report.ReportPage}, lay them out in {@code
 * ReportView} and draw them in {@code report.html}. Pages that compare runs are tables of texts,
 * drawn in {@code comparison.html}. What several pages share (head, first lines, tables, the axes
 * of plots, foot) is in {@code parts.html}.
 */
@NullMarked
package linkworthy.report;

import org.jspecify.annotations.NullMarked;
