package steelyard.drills.read;

/** A value and where it was written. */
record Placed<T>(Place place, T value) {}
