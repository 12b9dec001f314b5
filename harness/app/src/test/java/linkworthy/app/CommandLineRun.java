package linkworthy.app;

import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Instant;
import java.time.ZoneOffset;

/** One run of the program and what it said. */
record CommandLineRun(int exitCode, String out, String err) {
  static CommandLineRun of(Path home, String... arguments) {
    StringWriter out = new StringWriter();
    StringWriter err = new StringWriter();
    Clock clock = Clock.fixed(Instant.parse("2026-12-01T10:00:00Z"), ZoneOffset.UTC);
    int exitCode =
        Main.run(
            new Surroundings(new PrintWriter(out), new PrintWriter(err), false, clock, home),
            arguments);
    return new CommandLineRun(exitCode, out.toString(), err.toString());
  }
}
