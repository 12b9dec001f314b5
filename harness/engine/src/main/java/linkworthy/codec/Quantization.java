package linkworthy.codec;

/** Which quantiser each component has; both ends know it. */
sealed interface Quantization permits Quantizer, FrequencySteps {
  /** The quantiser of component k. */
  Quantizer component(int k);

  /** Whether values travel as 32-bit floats. */
  boolean isNone();

  /** As in labels: {@code step8}, {@code stepnone}, {@code q50}. */
  String label();

  /** As in the results' column {@code step}: the step in grey levels, {@code none}, {@code q50}. */
  String column();
}
