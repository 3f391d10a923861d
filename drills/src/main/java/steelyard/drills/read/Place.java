package steelyard.drills.read;

/** A place in a file; line and column count from 1, columns in characters. */
record Place(int line, int column) implements Comparable<Place> {
    static final Place START = new Place(1, 1);

    /** The file as a whole, one that could not be read for instance. */
    static final Place FILE = new Place(0, 0);

    @Override
    public int compareTo(Place other) {
        return line != other.line ? Integer.compare(line, other.line) : Integer.compare(column, other.column);
    }
}
