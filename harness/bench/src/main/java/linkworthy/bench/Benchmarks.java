package linkworthy.bench;

import java.util.concurrent.TimeUnit;
import org.openjdk.jmh.annotations.Mode;
import org.openjdk.jmh.runner.Runner;
import org.openjdk.jmh.runner.RunnerException;
import org.openjdk.jmh.runner.options.CommandLineOptionException;
import org.openjdk.jmh.runner.options.CommandLineOptions;
import org.openjdk.jmh.runner.options.OptionsBuilder;
import org.openjdk.jmh.runner.options.TimeValue;

/**
 * Runs the benchmarks of the single stages: mean milliseconds for each call, on one thread.
 *
 * <p>The default is short: one fork, three warm-ups and five measurements of half a second. The
 * arguments are those of JMH and go before the defaults, as in {@code -f 3 -i 10 CodecBenchmark}.
 */
public final class Benchmarks {
  private Benchmarks() {}

  /**
   * @throws CommandLineOptionException if JMH does not know an argument
   * @throws RunnerException if a benchmark fails
   */
  public static void main(String[] args) throws CommandLineOptionException, RunnerException {
    CommandLineOptions asked = new CommandLineOptions(args);
    OptionsBuilder options = new OptionsBuilder();
    options.parent(asked);
    options.shouldFailOnError(true);
    options.mode(Mode.AverageTime).timeUnit(TimeUnit.MILLISECONDS);
    options.forks(asked.getForkCount().orElse(1));
    options.warmupIterations(asked.getWarmupIterations().orElse(3));
    options.warmupTime(asked.getWarmupTime().orElse(TimeValue.milliseconds(500)));
    options.measurementIterations(asked.getMeasurementIterations().orElse(5));
    options.measurementTime(asked.getMeasurementTime().orElse(TimeValue.milliseconds(500)));
    new Runner(options.build()).run();
  }
}
