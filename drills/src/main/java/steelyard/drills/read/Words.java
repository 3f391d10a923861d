package steelyard.drills.read;

import java.util.List;
import java.util.stream.Stream;
import steelyard.drills.model.Worded;

/** Values that are one of a list of words. */
final class Words {
    private Words() {}

    static <E extends Enum<E> & Worded> Quantity<E> of(String noun, E[] constants) {
        List<E> all = List.of(constants);
        List<String> words = all.stream().map(Worded::word).toList();
        return new Quantity<>(
                noun,
                words.get(0),
                List.of(),
                words,
                text -> {
                    int index = words.indexOf(text);
                    return index < 0 ? null : all.get(index);
                },
                null);
    }

    /** Words without a type of their own. */
    static Quantity<String> of(String noun, String... words) {
        List<String> all = Stream.of(words).toList();
        return new Quantity<>(noun, all.get(0), List.of(), all, text -> all.contains(text) ? text : null, null);
    }
}
