package linkworthy.codec;

/** Mean removal and nothing else: the directions are the variables themselves. */
final class MeanBasis implements Basis {
  @Override
  public String id() {
    return "mean";
  }

  @Override
  public boolean isSent() {
    return false;
  }

  @Override
  public boolean isIdentity() {
    return true;
  }

  @Override
  public Directions directions(Arrangement arrangement, PictureShape shape, double[][] centred) {
    return new Directions(new double[0][], new double[0]);
  }
}
