package linkworthy.report;

/** A name and its value, shown as given. */
public record Fact(String name, String value) {}
