package linkworthy.report;

import java.util.List;

/**
 * A page of the handbook.
 *
 * @param title of this page
 * @param pages every page, for navigation
 * @param body HTML of its content, made of Markdown with everything foreign escaped
 * @param version version of the program
 */
public record HandbookPage(String title, List<Entry> pages, String body, String version) {
  public HandbookPage {
    pages = List.copyOf(pages);
  }

  /** A page in the navigation. */
  public record Entry(String title, String file, boolean isCurrent) {}
}
