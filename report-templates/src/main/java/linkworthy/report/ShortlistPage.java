package linkworthy.report;

import java.util.List;

/**
 * A shortlist: which codecs meet stated needs. Every number is already text.
 *
 * @param title name of the study
 * @param question what the study is to decide
 * @param answer the answer, a sentence
 * @param confidence what it rests on, a sentence or more
 * @param needs the needs in words, in order
 * @param rows a row a codec
 * @param open what would decide what is undecided, a sentence each
 * @param method how it was judged, a sentence each
 * @param version version of the program
 */
public record ShortlistPage(
    String title,
    String question,
    String answer,
    String confidence,
    List<String> needs,
    List<Row> rows,
    List<String> open,
    List<String> method,
    String version) {
  public ShortlistPage {
    needs = List.copyOf(needs);
    rows = List.copyOf(rows);
    open = List.copyOf(open);
    method = List.copyOf(method);
  }

  /**
   * A codec.
   *
   * @param dominated whether another codec is at least as good in price and PSNR and better in one
   * @param verdict {@code meets}, {@code fails} or {@code undecided}
   */
  public record Row(
      String codec,
      String bitsPerPixel,
      String psnrDb,
      boolean dominated,
      List<Entry> entries,
      String verdict) {
    public Row {
      entries = List.copyOf(entries);
    }
  }

  /**
   * A codec and a need.
   *
   * @param verdict {@code meets}, {@code fails} or {@code undecided}
   * @param figure the estimate
   * @param detail bound and place, a short line
   */
  public record Entry(String verdict, String figure, String detail) {}
}
