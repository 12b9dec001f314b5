package linkworthy.app;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import linkworthy.report.ComparisonPage;
import linkworthy.report.Fact;
import linkworthy.statistics.RowSample;

/**
 * What a recheck found: what was verified, what was not, what does not agree with the record, and
 * how likely it is to have missed altered rows. In words for the console and as a page.
 */
final class RecheckFindings {
  private static final int SHOWN = 5;

  /** So many mismatches stand on a page. */
  private static final int LISTED = 500;

  private static final List<Double> SHARES = List.of(0.01, 0.05);
  private static final List<Double> SHARES_OF_PAGE = List.of(0.001, 0.005, 0.01, 0.02, 0.05, 0.1);

  private final List<Fact> verified = new ArrayList<>();
  private final List<Fact> notVerified = new ArrayList<>();
  private final List<Mismatch> mismatches = new ArrayList<>();
  private long mismatched;
  private Optional<Rows> rows = Optional.empty();

  /** What does not agree; the trial is empty where it is no row that was repeated. */
  private record Mismatch(String found, String trial) {}

  /** How many rows the record has, and how many were repeated, drawn with a seed. */
  private record Rows(long all, long repeated, long seed) {
    double chanceMissed(long altered) {
      return RowSample.chanceMissed(all, altered, repeated);
    }

    long of(double share) {
      return RowSample.rowsOf(share, all);
    }

    boolean isSample() {
      return repeated < all;
    }
  }

  void verified(String what, String found) {
    verified.add(new Fact(what, found));
  }

  void notVerified(String what, String why) {
    notVerified.add(new Fact(what, why));
  }

  void mismatch(String found) {
    mismatch(found, "");
  }

  /** Of a row that was repeated. */
  void mismatch(String found, String trial) {
    mismatched++;
    if (mismatches.size() < LISTED) {
      mismatches.add(new Mismatch(found, trial));
    }
  }

  /** Mismatches that are counted and not named. */
  void more(long count) {
    mismatched += count;
  }

  long mismatched() {
    return mismatched;
  }

  boolean stands() {
    return mismatched == 0;
  }

  void repeated(long sampled, long all, long seed) {
    rows = Optional.of(new Rows(all, sampled, seed));
  }

  /** For the console: a line each, the answer last. */
  List<String> lines() {
    List<String> lines = new ArrayList<>();
    verified.forEach(fact -> lines.add("verified      " + line(fact)));
    notVerified.forEach(fact -> lines.add("not verified  " + line(fact)));
    rows.filter(Rows::isSample).ifPresent(sample -> addChances(lines, sample));
    mismatches.stream()
        .limit(SHOWN)
        .forEach(mismatch -> lines.add("MISMATCH      " + mismatch.found()));
    long shown = Math.min(SHOWN, mismatches.size());
    if (mismatched > shown) {
      lines.add("MISMATCH      and " + (mismatched - shown) + " more");
    }
    lines.add(
        stands()
            ? "the record stands, as far as it was verified"
            : "the record does not stand: mismatches: " + mismatched);
    return lines;
  }

  private static void addChances(List<String> lines, Rows rows) {
    lines.add(
        "not verified  if 1 row was altered, the chance to have missed it is "
            + chance(rows.chanceMissed(1)));
    for (double share : SHARES) {
      long altered = rows.of(share);
      lines.add(
          String.format(
              Locale.ROOT,
              "not verified  if %.0f %% of the rows were altered (%d), the chance to have missed"
                  + " all of them is %s",
              100 * share,
              altered,
              chance(rows.chanceMissed(altered))));
    }
  }

  private static String line(Fact fact) {
    return fact.name() + ": " + fact.value();
  }

  private static String chance(double chance) {
    return chance >= 0.001 || chance == 0
        ? String.format(Locale.ROOT, "%.4f", chance)
        : String.format(Locale.ROOT, "%.2e", chance);
  }

  /** The same as a page. */
  ComparisonPage page(String study, Path folder) {
    List<ComparisonPage.Table> tables = new ArrayList<>();
    if (!stands()) {
      tables.add(mismatches(folder));
    }
    rows.filter(Rows::isSample).ifPresent(sample -> tables.add(chances(sample)));
    tables.add(table("Verified", "what agrees with the record", "what was found", verified));
    tables.add(table("Not verified", "what this check says nothing about", "why", notVerified));
    return new ComparisonPage(
        study,
        "recheck",
        "Is the record of this study what its program, pictures and noise give?",
        answer(),
        remarks(),
        tables,
        DEFINITIONS,
        commands(folder),
        Version.text());
  }

  private String answer() {
    if (!stands()) {
      return "The record does not stand: "
          + mismatched
          + (mismatched == 1 ? " mismatch was found." : " mismatches were found.");
    }
    return rows.filter(Rows::isSample)
        .map(
            sample ->
                "The record stands, as far as it was verified: "
                    + sample.repeated()
                    + " of "
                    + sample.all()
                    + " trials were repeated and are equal, bit for bit.")
        .orElseGet(
            () ->
                "The record stands: all "
                    + rows.map(Rows::all).orElse(0L)
                    + " trials were repeated and are equal, bit for bit.");
  }

  private List<String> remarks() {
    List<String> remarks = new ArrayList<>();
    rows.ifPresentOrElse(
        found -> remarks.addAll(found.isSample() ? remarks(found) : remarksOfAll(found)),
        () -> remarks.add("No trial was repeated: what the trials rest on must be mended first."));
    remarks.add(
        "It says that the program gives these figures, not that they hold in the field: simulation"
            + " does not replace a field trial.");
    return remarks;
  }

  private static List<String> remarksOfAll(Rows rows) {
    return List.of("Rows repeated: all " + rows.all() + "; no altered row can have been missed.");
  }

  private static List<String> remarks(Rows rows) {
    return List.of(
        "Rows repeated: "
            + rows.repeated()
            + " of "
            + rows.all()
            + ", drawn at random with the seed "
            + rows.seed()
            + ". The figures of the other "
            + (rows.all() - rows.repeated())
            + " were read, not repeated.",
        "If 1 row in 100 had been altered, the chance that this check had missed all of them is "
            + chance(rows.chanceMissed(rows.of(0.01)))
            + "; a single altered row it misses with the chance "
            + chance(rows.chanceMissed(1))
            + ".");
  }

  private ComparisonPage.Table mismatches(Path folder) {
    List<List<String>> table = new ArrayList<>();
    for (Mismatch mismatch : mismatches) {
      String trial = mismatch.trial();
      table.add(
          List.of(
              Integer.toString(table.size() + 1),
              mismatch.found(),
              trial.isEmpty()
                  ? ""
                  : PageOption.command("", "replay", folder, "--trial", trial).value()));
    }
    return new ComparisonPage.Table(
        "Mismatches",
        mismatched > mismatches.size()
            ? "the first " + mismatches.size() + " of " + mismatched
            : "",
        List.of(
            new ComparisonPage.Column("no.", true),
            new ComparisonPage.Column("what does not agree", ComparisonPage.Style.PROSE),
            new ComparisonPage.Column("to see it for yourself", ComparisonPage.Style.COMMANDS)),
        table);
  }

  private static ComparisonPage.Table chances(Rows rows) {
    List<List<String>> table = new ArrayList<>();
    table.add(List.of("1 row", "1", chance(rows.chanceMissed(1))));
    for (double share : SHARES_OF_PAGE) {
      long altered = rows.of(share);
      table.add(
          List.of(
              DriftWords.plain(100 * share) + " %",
              Long.toString(altered),
              chance(rows.chanceMissed(altered))));
    }
    return new ComparisonPage.Table(
        "What the sample may have missed",
        "for altered rows that stand anywhere in the record",
        List.of(
            new ComparisonPage.Column("if so much was altered", false),
            new ComparisonPage.Column("rows", true),
            new ComparisonPage.Column("chance to have missed all of them", true)),
        table);
  }

  private static ComparisonPage.Table table(
      String heading, String note, String second, List<Fact> facts) {
    return new ComparisonPage.Table(
        heading,
        note,
        List.of(
            new ComparisonPage.Column("part of the record", false),
            new ComparisonPage.Column(second, false)),
        facts.stream().map(fact -> List.of(fact.name(), fact.value())).toList());
  }

  private List<Fact> commands(Path folder) {
    List<Fact> commands = new ArrayList<>();
    rows.filter(Rows::isSample)
        .ifPresent(
            sample ->
                commands.addAll(
                    List.of(
                        PageOption.command(
                            "this check",
                            "recheck",
                            folder,
                            "--sample",
                            sample.repeated(),
                            "--seed",
                            sample.seed()),
                        PageOption.command("another sample", "recheck", folder))));
    commands.add(PageOption.command("every trial", "recheck", folder, "--all"));
    return commands;
  }

  private static final List<Fact> DEFINITIONS =
      List.of(
          new Fact(
              "verified",
              "computed or read again just now, and found to be what the record says, to the last"
                  + " bit or letter"),
          new Fact(
              "study",
              "study.yaml has the checksum (SHA-256) that run.json notes, and its purpose is the one"
                  + " noted there"),
          new Fact(
              "noise models, pictures, corpus",
              "what the trials were made of: each has the checksum that run.json notes. Whoever"
                  + " rewrote all of it together would have to have run the trials anew"),
          new Fact(
              "order",
              "every row of trials.csv is read and stands where the study puts it: none is"
                  + " missing, doubled or added"),
          new Fact(
              "cells, predictions, nodes",
              "the tables of means follow from the rows, and those of formulas from the study;"
                  + " both are computed again in full"),
          new Fact(
              "rows repeated",
              "the picture goes through the noise, the codec and the link once more, and every"
                  + " figure of the row is compared"),
          new Fact(
              "chance to have missed",
              "of all samples of n out of M rows, the share that holds none of D altered ones:"
                  + " C(M - D, n) / C(M, n), wherever they stand (hypergeometric distribution)"),
          new Fact(
              "to see it for yourself",
              "the command repeats that one trial, writes its pictures, and says which figures"
                  + " differ"));
}
