package steelyard.drills.model;

/** The words for what the balancer thinks of a backend, as drills and runs use them. */
public enum Standing implements Worded {
    WITHDRAWN("withdrawn"),
    DRAINING("draining"),
    DOWN("down"),
    BENCHED("benched"),
    WARMING("warming"),
    UP("up");

    private final String word;

    Standing(String word) {
        this.word = word;
    }

    @Override
    public String word() {
        return word;
    }
}
