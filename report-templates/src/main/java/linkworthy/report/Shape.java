package linkworthy.report;

/** Markers of a plot, as SVG path data; each can be told from the others without colour. */
final class Shape {
  private static final double R = 3.6;

  /** Number of different markers. */
  static final int KINDS = 6;

  private Shape() {}

  static String at(int kind, double x, double y) {
    return switch (Math.floorMod(kind, KINDS)) {
      case 0 -> move(x - R, y) + "a" + arc(2 * R) + "a" + arc(-2 * R) + "z";
      case 1 -> polygon(x, y, -R, -R, R, -R, R, R, -R, R);
      case 2 -> polygon(x, y, 0, -1.3 * R, 1.2 * R, R, -1.2 * R, R);
      case 3 -> polygon(x, y, 0, -1.4 * R, 1.4 * R, 0, 0, 1.4 * R, -1.4 * R, 0);
      case 4 -> polygon(x, y, 0, 1.3 * R, 1.2 * R, -R, -1.2 * R, -R);
      default ->
          polygon(
              x, y, -1.4 * R, -1, -1, -1, -1, -1.4 * R, 1, -1.4 * R, 1, -1, 1.4 * R, -1, 1.4 * R, 1,
              1, 1, 1, 1.4 * R, -1, 1.4 * R, -1, 1, -1.4 * R, 1);
    };
  }

  private static String arc(double dx) {
    return Numbers.coordinate(R)
        + " "
        + Numbers.coordinate(R)
        + " 0 1 0 "
        + (Numbers.coordinate(dx) + " 0");
  }

  private static String move(double x, double y) {
    return "M" + Numbers.coordinate(x) + " " + Numbers.coordinate(y);
  }

  private static String polygon(double x, double y, double... offsets) {
    StringBuilder path = new StringBuilder();
    for (int i = 0; i < offsets.length; i += 2) {
      path.append(i == 0 ? 'M' : 'L')
          .append(Numbers.coordinate(x + offsets[i]))
          .append(' ')
          .append(Numbers.coordinate(y + offsets[i + 1]));
    }
    return path.append('z').toString();
  }
}
