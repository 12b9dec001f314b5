package linkworthy.report;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Optional;

/** Finds and words the answer that {@link Answer#from} describes. */
final class DefaultAnswer {
  /** Codecs this near to the best, in dB, are taken as equally good; common practice, no source. */
  static final double MARGIN_DB = 0.5;

  /** Fewer pictures than this are called thin evidence; common practice, no source. */
  private static final int FEW_PICTURES = 5;

  private final FigureGrid grid;
  private final boolean noisy;
  private final List<Condition> conditions;

  DefaultAnswer(FigureGrid grid) {
    this.grid = grid;
    List<Condition> all = grid.noises().stream().flatMap(n -> n.conditions().stream()).toList();
    this.noisy = !all.isEmpty();
    this.conditions = noisy ? all : grid.clean().stream().toList();
  }

  /** A codec with its mean PSNR in dB and its mean sent bits per pixel over some conditions. */
  record Score(CodecColumn codec, double psnr, double bits) {
    String label() {
      return codec.label();
    }

    String priced() {
      return label() + " (" + Numbers.significant(bits) + " bits per pixel)";
    }

    /** How far below the other in dB; two lossless codecs are level. */
    double behind(Score other) {
      return psnr == other.psnr ? 0 : other.psnr - psnr;
    }
  }

  Answer answer() {
    List<Score> scores = scores(conditions);
    if (scores.isEmpty()) {
      return new Answer(
          "This study gives no answer: no codec has a figure in every condition.",
          "Nothing can be concluded.",
          List.of(),
          List.of());
    }
    Score best = best(scores);
    Score chosen = cheapestNear(best, scores);
    return new Answer(
        sentence(scores, best, chosen),
        confidence(chosen),
        exceptions(chosen),
        reasons(scores),
        chosen.label());
  }

  private List<Score> scores(List<Condition> over) {
    List<Score> scores = new ArrayList<>();
    for (CodecColumn codec : grid.codecs()) {
      double psnr = over.stream().mapToDouble(c -> grid.psnr(c, codec)).sum() / over.size();
      double bits = over.stream().mapToDouble(c -> grid.bits(c, codec)).sum() / over.size();
      if (!Double.isNaN(psnr)) {
        scores.add(new Score(codec, psnr, bits));
      }
    }
    return scores;
  }

  /** Highest PSNR, then fewest bits, then first in the study. */
  private static Score best(List<Score> scores) {
    return scores.stream()
        .min(
            Comparator.comparingDouble((Score s) -> -s.psnr())
                .thenComparingDouble(DefaultAnswer::price))
        .orElseThrow();
  }

  private static List<Score> near(Score best, List<Score> scores) {
    return scores.stream().filter(s -> s.behind(best) <= MARGIN_DB).toList();
  }

  private static Score cheapestNear(Score best, List<Score> scores) {
    return near(best, scores).stream()
        .min(
            Comparator.comparingDouble(DefaultAnswer::price)
                .thenComparingDouble((Score s) -> -s.psnr()))
        .orElseThrow();
  }

  private static double price(Score score) {
    return Double.isNaN(score.bits()) ? Double.POSITIVE_INFINITY : score.bits();
  }

  private String where() {
    if (!noisy) {
      return "without any noise";
    }
    return conditions.size() == 1
        ? "in the one noisy condition"
        : "over the " + conditions.size() + " noisy conditions";
  }

  private String sentence(List<Score> scores, Score best, Score chosen) {
    String bits = Numbers.significant(chosen.bits()) + " bits per pixel";
    String psnr = Numbers.db(chosen.psnr()) + " dB";
    if (grid.codecs().size() == 1) {
      return chosen.label()
          + " is the only codec measured, so there is nothing to choose from: "
          + ("it sends " + bits + " for a mean PSNR of " + psnr + " " + where() + ".");
    }
    List<Score> near = near(best, scores);
    String margin = Numbers.typed(MARGIN_DB) + " dB";
    if (near.size() == 1) {
      return chosen.label()
          + (" has the best mean PSNR " + where() + ", " + psnr + ", and no other codec comes ")
          + ("within " + margin + " of it; it sends " + bits + ".");
    }
    String choice =
        chosen.label() + " sends the fewest bits, " + Numbers.significant(chosen.bits());
    if (chosen.equals(best)) {
      return choice
          + (" per pixel, of the " + near.size() + " codecs within " + margin + " of the best ")
          + ("mean PSNR " + where() + ", and is itself the best with " + psnr + ".");
    }
    return choice
        + (" per pixel, of the " + near.size() + " codecs within " + margin + " of the best ")
        + ("mean PSNR " + where() + ": " + psnr + ", " + Numbers.db(chosen.behind(best)))
        + (" dB behind " + best.label() + ", which sends " + Numbers.significant(best.bits()))
        + ".";
  }

  private String confidence(Score chosen) {
    List<Figure> figures =
        conditions.stream().flatMap(c -> grid.find(c, chosen.codec()).stream()).toList();
    int pictures = figures.stream().mapToInt(f -> f.evidence().pictures()).min().orElse(0);
    String evidence = "Measured on " + Numbers.count(pictures, "picture", "pictures");
    String text = evidence + ", " + replicates(figures) + ". " + standing(figures);
    if (pictures < 2) {
      return text
          + " One picture gives no picture interval: nothing is known about other pictures.";
    }
    String few = pictures < FEW_PICTURES ? " So few pictures are thin evidence." : "";
    return text + pictureIntervals(figures) + few;
  }

  private static String replicates(List<Figure> figures) {
    long[] each =
        figures.stream()
            .filter(f -> f.evidence().pictures() > 0)
            .mapToLong(f -> f.evidence().trials() / f.evidence().pictures())
            .sorted()
            .toArray();
    if (each.length == 0) {
      return "with no trial recorded";
    }
    long least = each[0];
    long most = each[each.length - 1];
    return least == most
        ? Numbers.count(most, "replicate", "replicates") + " each"
        : least + " to " + most + " replicates each";
  }

  private static String standing(List<Figure> figures) {
    long level = count(figures, Standing.BEST) + count(figures, Standing.NOT_DISTINGUISHABLE);
    long below = count(figures, Standing.BELOW);
    if (level + below == 0) {
      return "No paired test was possible.";
    }
    String text =
        "Row by row on the same noise it is the best or not distinguishable from it in "
            + (level + " of " + figures.size());
    if (below > 0) {
      double most =
          figures.stream()
              .filter(f -> f.comparison().standing() == Standing.BELOW)
              .mapToDouble(f -> f.comparison().behindBestDb())
              .max()
              .orElse(Double.NaN);
      text += " and below it in " + below + " (by at most " + Numbers.db(most) + " dB)";
    }
    return text + ".";
  }

  private static long count(List<Figure> figures, Standing standing) {
    return figures.stream().filter(f -> f.comparison().standing() == standing).count();
  }

  private static String pictureIntervals(List<Figure> figures) {
    double[] widths =
        figures.stream()
            .mapToDouble(f -> f.quality().pictureHalfWidthDb())
            .filter(Double::isFinite)
            .sorted()
            .toArray();
    if (widths.length == 0) {
      return " No picture interval is available.";
    }
    String least = Numbers.db(widths[0]);
    String most = Numbers.db(widths[widths.length - 1]);
    String range = least.equals(most) ? "\u00b1" + most : "\u00b1" + least + " to \u00b1" + most;
    return " On other pictures like these its mean PSNR is known to "
        + (range + " dB (picture interval of a row).");
  }

  private List<String> exceptions(Score chosen) {
    List<String> exceptions = new ArrayList<>();
    for (FigureGrid.Noise noise : grid.noises()) {
      List<Score> scores = scores(noise.conditions());
      Optional<Score> own = scores.stream().filter(s -> s.codec().equals(chosen.codec())).findAny();
      if (own.isPresent() && own.get().behind(best(scores)) > MARGIN_DB) {
        Score best = best(scores);
        exceptions.add(
            "Under "
                + (noise.title() + " it is " + Numbers.db(own.get().behind(best)) + " dB behind ")
                + (best.priced() + "."));
      }
    }
    double outage =
        conditions.stream()
            .flatMap(c -> grid.find(c, chosen.codec()).stream())
            .mapToDouble(Figure::outageRate)
            .filter(rate -> rate > 0)
            .max()
            .orElse(0);
    if (outage > 0) {
      exceptions.add(
          "In its worst condition nothing usable arrives in "
              + (Numbers.percent(outage) + " of trials (outage)."));
    }
    return exceptions;
  }

  private List<String> reasons(List<Score> scores) {
    if (grid.codecs().size() == 1) {
      return List.of();
    }
    List<String> reasons = new ArrayList<>();
    for (FigureGrid.Noise noise : grid.noises()) {
      List<Score> here = scores(noise.conditions());
      if (!here.isEmpty()) {
        Score best = best(here);
        reasons.add(
            "Best under "
                + (noise.title() + ": " + best.priced() + ", " + Numbers.db(best.psnr()) + " dB."));
      }
    }
    List<Score> front =
        scores.stream()
            .filter(s -> Double.isFinite(s.bits()))
            .filter(s -> scores.stream().noneMatch(o -> dominates(o, s)))
            .sorted(Comparator.comparingDouble(Score::bits))
            .toList();
    if (!front.isEmpty()) {
      Score cheapest = front.get(0);
      reasons.add(
          "Cheapest: "
              + (cheapest.priced() + ", " + Numbers.db(cheapest.psnr()) + " dB, ")
              + (Numbers.db(cheapest.behind(best(scores))) + " dB behind the best."));
      reasons.add(
          front.size()
              + (" of "
                  + scores.size()
                  + " codecs are non-dominated: no other is at least as cheap and as ")
              + "good, and better in one of the two.");
    }
    int left = grid.codecs().size() - scores.size();
    if (left > 0) {
      reasons.add(
          Numbers.count(left, "codec lacks", "codecs lack")
              + " a figure in some condition and did not compete.");
    }
    return reasons;
  }

  private static boolean dominates(Score one, Score other) {
    return Dominance.over(one.bits(), one.psnr(), other.bits(), other.psnr());
  }
}
