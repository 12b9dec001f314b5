package linkworthy.quality;

class MeanAbsoluteErrorTest extends QualityContractTest {
  @Override
  protected QualityMeasure measure() {
    return new MeanAbsoluteError();
  }

  @Override
  protected double perfect() {
    return 0;
  }
}
