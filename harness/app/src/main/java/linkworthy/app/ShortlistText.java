package linkworthy.app;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import linkworthy.decision.Judgement;
import linkworthy.decision.Measurements;
import linkworthy.decision.Need;
import linkworthy.decision.Needs;
import linkworthy.decision.Shortlist;
import linkworthy.decision.Verdict;
import linkworthy.input.YamlNode;
import linkworthy.report.Answer;
import linkworthy.report.ShortlistPage;
import linkworthy.results.ResultsFolder;
import linkworthy.results.RunRecord;

/** A shortlist in words: lines for the console, and a page. */
final class ShortlistText {
  private final Shortlist shortlist;
  private final Measurements measured;

  ShortlistText(Shortlist shortlist, Measurements measured) {
    this.shortlist = shortlist;
    this.measured = measured;
  }

  /**
   * The shortlist of a run by a file of needs.
   *
   * @throws linkworthy.input.BadInput if the run was not finished or the file cannot be used
   */
  static ShortlistText of(ResultsFolder results, Path need) {
    results.requireComplete();
    YamlNode needs = YamlNode.read(need);
    Measurements measured = Measurements.forShortlist(Needs.measures(needs));
    long unused = results.trials(measured::add);
    return new ShortlistText(Shortlist.of(measured, Needs.read(needs, measured)), measured);
  }

  /** Whether a codec is shown to meet all needs. */
  boolean hasAnswer() {
    return shortlist.cheapest().isPresent();
  }

  /** The table for the console, what would decide what is open, and the answer last. */
  List<String> lines() {
    List<String> lines = new ArrayList<>();
    List<String> needs = needs();
    for (int i = 0; i < needs.size(); i++) {
      lines.add("need " + (i + 1) + ": " + needs.get(i));
    }
    lines.add("");
    lines.addAll(table());
    lines.add("");
    lines.add(
        "figure (bound that would have to reach the level); o: not dominated in price and PSNR");
    if (!open().isEmpty()) {
      lines.add("");
      lines.add(openHead());
      open().forEach(lines::add);
    }
    lines.add("");
    lines.add(confidence());
    lines.add(answer());
    return lines;
  }

  private List<String> table() {
    List<List<String>> rows = new ArrayList<>();
    List<String> head = new ArrayList<>(List.of("codec", "bits/px", "PSNR dB", "", "all"));
    for (int i = 1; i <= shortlist.needs().needs().size(); i++) {
      head.add("need " + i);
    }
    rows.add(head);
    for (Shortlist.Candidate candidate : shortlist.candidates()) {
      List<String> row = new ArrayList<>();
      row.add(candidate.codec());
      row.add(fixed(candidate.bitsPerPixel(), 3));
      row.add(fixed(candidate.psnrDb(), 2));
      row.add(candidate.dominated() ? "" : "o");
      row.add(candidate.verdict().toString());
      for (int i = 0; i < candidate.judgements().size(); i++) {
        Judgement judgement = candidate.judgements().get(i);
        Need need = shortlist.needs().needs().get(i);
        row.add(
            judgement.verdict()
                + " "
                + figure(need, judgement.estimate())
                + bound(need, judgement));
      }
      rows.add(row);
    }
    return aligned(rows);
  }

  private static List<String> aligned(List<List<String>> rows) {
    int columns = rows.get(0).size();
    int[] widths = new int[columns];
    for (List<String> row : rows) {
      for (int i = 0; i < columns; i++) {
        widths[i] = Math.max(widths[i], row.get(i).length());
      }
    }
    List<String> lines = new ArrayList<>();
    for (List<String> row : rows) {
      StringBuilder line = new StringBuilder();
      for (int i = 0; i < columns; i++) {
        String format =
            i == 1 || i == 2 ? "%" + widths[i] + "s  " : "%-" + Math.max(1, widths[i]) + "s  ";
        line.append(String.format(Locale.ROOT, format, row.get(i)));
      }
      lines.add(line.toString().stripTrailing());
    }
    return lines;
  }

  /** The answer for the report of the run: what is recommended, how surely, by what margin. */
  Answer reportAnswer() {
    return new Answer(
        answer(),
        confidence(),
        List.of(),
        shortlist.cheapest().isEmpty() ? needs() : margins(shortlist.cheapest().get()),
        shortlist.cheapest().map(Shortlist.Candidate::codec).orElse(""));
  }

  private List<String> margins(Shortlist.Candidate chosen) {
    List<String> margins = new ArrayList<>();
    for (int i = 0; i < chosen.judgements().size(); i++) {
      Need need = shortlist.needs().needs().get(i);
      Judgement judgement = chosen.judgements().get(i);
      margins.add(
          needs().get(i)
              + ": "
              + judgement.verdict()
              + " with "
              + figure(need, judgement.estimate())
              + ", margin "
              + figure(need, judgement.margin())
              + bound(need, judgement).replace("(", "(bound ")
              + ", nearest to missing it under "
              + judgement.condition().text());
    }
    return margins;
  }

  private static String bound(Need need, Judgement judgement) {
    return Double.isNaN(judgement.bound()) ? "" : " (" + figure(need, judgement.bound()) + ")";
  }

  private static String figure(Need need, double value) {
    boolean rate = need.isShare() || need.measure().equals("outage-rate");
    if (rate && Double.isFinite(value)) {
      return fixed(value * 100, 1) + " %";
    }
    return significant(value);
  }

  private static String significant(double value) {
    if (!Double.isFinite(value) || value == 0) {
      return special(value);
    }
    BigDecimal rounded = new BigDecimal(value).round(new MathContext(4, RoundingMode.HALF_EVEN));
    return rounded.stripTrailingZeros().toPlainString();
  }

  private static String fixed(double value, int decimals) {
    return Double.isFinite(value)
        ? new BigDecimal(value).setScale(decimals, RoundingMode.HALF_UP).toPlainString()
        : special(value);
  }

  private static String special(double value) {
    return Double.isNaN(value) ? "n/a" : value == 0 ? "0" : value > 0 ? "inf" : "-inf";
  }

  private List<String> needs() {
    return shortlist.needs().needs().stream()
        .map(
            need ->
                need.text()
                    + (need.conditions().size() == 1
                        ? " (1 condition)"
                        : " (each of " + need.conditions().size() + " conditions)"))
        .toList();
  }

  private String openHead() {
    return "Would decide it, if like those measured: so many pictures in all (now "
        + measured.pictures()
        + "), or so many replicates of each:";
  }

  /** What would decide the codecs that fail no need and are not shown to meet all, a line each. */
  private List<String> open() {
    List<String> open = new ArrayList<>();
    for (Shortlist.Candidate candidate : shortlist.candidates()) {
      if (candidate.verdict() == Verdict.UNDECIDED) {
        List<String> ways = new ArrayList<>();
        for (int i = 0; i < candidate.judgements().size(); i++) {
          Judgement judgement = candidate.judgements().get(i);
          if (judgement.verdict() == Verdict.UNDECIDED) {
            ways.add("need " + (i + 1) + " " + decides(judgement));
          }
        }
        open.add(candidate.codec() + ": " + String.join("; ", ways));
      }
    }
    return open;
  }

  private static String decides(Judgement judgement) {
    if (Double.isNaN(judgement.estimate())) {
      return "was not measured under " + judgement.condition().text();
    }
    if (Double.isInfinite(judgement.estimate())) {
      return "has identical pictures and no mean (ask for a share of pictures)";
    }
    List<String> ways = new ArrayList<>();
    if (judgement.pictures() > 0) {
      ways.add("about " + judgement.pictures() + " pictures");
    }
    if (judgement.replicates() > 0) {
      ways.add("about " + judgement.replicates() + " replicates");
    }
    String side = judgement.margin() > 0 ? "is on the right side, " : "is on the wrong side, ";
    return ways.isEmpty() ? "lies on the level" : side + String.join(" or ", ways);
  }

  private String confidence() {
    return "Each 'meets' or 'fails' on one need is wrong with a chance of at most "
        + significant(shortlist.errorOfOne())
        + ", all of the table together with at most "
        + significant(1 - shortlist.needs().confidence())
        + " (Bonferroni over "
        + shortlist.candidates().size()
        + " codecs and "
        + shortlist.needs().needs().size()
        + (shortlist.needs().needs().size() == 1 ? " need)" : " needs)")
        + ", for pictures like the "
        + measured.pictures()
        + " measured.";
  }

  private String answer() {
    if (shortlist.cheapest().isPresent()) {
      Shortlist.Candidate cheapest = shortlist.cheapest().get();
      long meeting = count(Verdict.MEETS);
      return cheapest.codec()
          + " is the cheapest codec shown to meet all needs: "
          + fixed(cheapest.bitsPerPixel(), 3)
          + " bits per pixel"
          + (meeting == 1 ? "; no other one is shown to." : "; " + meeting + " are shown to.");
    }
    long undecided = count(Verdict.UNDECIDED);
    return "No codec is shown to meet all needs: "
        + count(Verdict.FAILS)
        + (count(Verdict.FAILS) == 1 ? " fails, " : " fail, ")
        + undecided
        + " undecided"
        + (undecided == 0 ? "." : ", the cheapest of them " + firstUndecided() + ".");
  }

  private String firstUndecided() {
    return shortlist.candidates().stream()
        .filter(c -> c.verdict() == Verdict.UNDECIDED)
        .map(Shortlist.Candidate::codec)
        .findFirst()
        .orElse("none");
  }

  private long count(Verdict verdict) {
    return shortlist.candidates().stream().filter(c -> c.verdict() == verdict).count();
  }

  /** The same as a page. */
  ShortlistPage page(RunRecord run) {
    return new ShortlistPage(
        run.study(),
        run.purpose(),
        answer(),
        confidence(),
        needs(),
        shortlist.candidates().stream().map(this::row).toList(),
        open(),
        METHOD,
        Version.text());
  }

  private ShortlistPage.Row row(Shortlist.Candidate candidate) {
    List<ShortlistPage.Entry> entries = new ArrayList<>();
    for (int i = 0; i < candidate.judgements().size(); i++) {
      Judgement judgement = candidate.judgements().get(i);
      Need need = shortlist.needs().needs().get(i);
      entries.add(
          new ShortlistPage.Entry(
              judgement.verdict().toString(),
              figure(need, judgement.estimate()),
              "bound " + figure(need, judgement.bound()) + ", " + judgement.condition().text()));
    }
    return new ShortlistPage.Row(
        candidate.codec(),
        fixed(candidate.bitsPerPixel(), 3),
        fixed(candidate.psnrDb(), 2),
        candidate.dominated(),
        entries,
        candidate.verdict().toString());
  }

  private static final List<String> METHOD =
      List.of(
          "A need must hold in each of its conditions. A picture's figure is the mean over its"
              + " replicates; the pictures are the sample.",
          "Share of pictures: the pictures that reach the level are counted, and the share is bounded"
              + " one-sidedly by Clopper and Pearson's method (1934), which is wrong at most as"
              + " often as stated.",
          "Mean: a one-sided bound by Student's t over the pictures' figures, with Johnson's correction"
              + " (1978) for skewness where that is more cautious. Six codecs of skewness 1 on 12"
              + " pictures had a wrong word in 7 % of simulated tables, of 5 % stated.",
          "Outage rate: the wider of the bound over pictures and of Clopper and Pearson's bound over"
              + " trials.",
          "Meets: shown in every condition. Fails: shown in some condition. Undecided: neither.",
          "Dominated: another codec sends no more bits at no lower mean PSNR and is better in one of"
              + " them; by means alone.",
          "How many pictures or replicates would decide it supposes that further ones are like those"
              + " measured.");
}
