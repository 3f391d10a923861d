package steelyard.drills.model;

/** A constant that has a word of its own in drill files, output and documents. */
public interface Worded {
    /** The word, in the spelling of the drill file. */
    String word();
}
