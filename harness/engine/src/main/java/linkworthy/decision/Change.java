package linkworthy.decision;

/**
 * Something that is not the same in two runs, as their records have it.
 *
 * @param what it is
 * @param before in the old run, empty if it was not there
 * @param after in the new run, empty if it is not there
 */
public record Change(String what, String before, String after) {}
