package linkworthy.app;

import java.io.PrintWriter;
import java.nio.file.Path;
import java.time.Clock;

/**
 * What the program touches of the world besides files.
 *
 * @param terminal whether {@code err} is a terminal that shows a progress bar
 * @param home the project's folder, under which {@code results/} lies; the current folder where the
 *     program was started without its launcher
 */
record Surroundings(PrintWriter out, PrintWriter err, boolean terminal, Clock clock, Path home) {}
