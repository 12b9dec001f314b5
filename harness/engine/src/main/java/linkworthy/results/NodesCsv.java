package linkworthy.results;

import static linkworthy.results.CsvTable.number;
import static linkworthy.results.CsvTable.whole;
import static linkworthy.results.CsvTable.words;

import java.nio.file.Path;
import java.util.List;
import linkworthy.trial.NodeShare;

/**
 * {@code nodes.csv}: a row for each node of each codec that has helper nodes; only there where the
 * study names a node and has such a codec.
 */
public final class NodesCsv {
  /** Name of the file in a results folder. */
  public static final String FILE = "nodes.csv";

  static final CsvTable<NodeShare> TABLE =
      new CsvTable<>(
          List.of(
              words("codec", NodeShare::codec),
              whole("node", NodeShare::node),
              number("macs_mean", NodeShare::macs),
              number("memory_kib_mean", NodeShare::memoryKib),
              number("raw_sent_bits_mean", NodeShare::rawSentBits),
              number("raw_received_bits_mean", NodeShare::rawReceivedBits),
              number("coded_sent_bits_mean", NodeShare::codedSentBits),
              number("received_bits_mean", NodeShare::receivedBits),
              number("energy_mj_mean", NodeShare::energyMj)),
          NodesCsv::share);

  private NodesCsv() {}

  /** The columns, in order. */
  public static List<String> columns() {
    return TABLE.names();
  }

  /** The header line, then a line for each row. */
  public static String text(List<NodeShare> shares) {
    return TABLE.text(shares);
  }

  /**
   * @throws linkworthy.input.BadInput if the file is missing, cut off, or no table of nodes
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public static List<NodeShare> read(Path file) {
    return TABLE.read(file);
  }

  private static NodeShare share(CsvRow row) {
    return new NodeShare(
        row.words("codec"),
        row.count("node"),
        row.number("macs_mean"),
        row.number("memory_kib_mean"),
        row.number("raw_sent_bits_mean"),
        row.number("raw_received_bits_mean"),
        row.number("coded_sent_bits_mean"),
        row.number("received_bits_mean"),
        row.number("energy_mj_mean"));
  }
}
