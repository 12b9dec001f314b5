package linkworthy.app;

import java.util.List;

/** What a run of the program left: its exit code and what it printed. */
record Outcome(int code, String out, String err) {
  List<String> errors() {
    return err.lines().toList();
  }
}
