package linkworthy.input;

import java.util.Locale;

/** Keeps messages to one printable line, whatever text they quote. */
final class OneLine {
  private OneLine() {}

  /** The text with each control character and line separator replaced by its code. */
  static String of(String text) {
    StringBuilder out = new StringBuilder(text.length());
    for (int i = 0; i < text.length(); i++) {
      char c = text.charAt(i);
      if (Character.isISOControl(c) || c == '\u2028' || c == '\u2029') {
        out.append(String.format(Locale.ROOT, "\\u%04x", (int) c));
      } else {
        out.append(c);
      }
    }
    return out.toString();
  }
}
