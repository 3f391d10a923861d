package steelyard.drills.read;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Hashing;

/** Reads {@code hash:} of a pool. */
final class HashReader {
    private static final Quantity<String> BY = Words.of("what is hashed", "client", "path");
    private static final Quantity<Hashing.Table> TABLE = Words.of("a table", Hashing.Table.values());
    private static final Quantity<Integer> POINTS = Numbers.from(1, 10_000);
    private static final Quantity<Integer> SIZE = Numbers.from(3, 10_000_000)
            .that(HashReader::isPrime, "is no prime from 3 to 10000000", "write a prime, such as 65537");

    private static final Key CLIENT = new Key(Hashing.By.CLIENT, null);

    private final Problems problems;

    HashReader(Problems problems) {
        this.problems = problems;
    }

    Hashing read(Fields fields) {
        Hashing.Table table = fields.read("table", TABLE, Hashing.USUAL.table());
        checkOf(fields, "points", Hashing.Table.RING, table);
        checkOf(fields, "size", Hashing.Table.PERMUTATION, table);
        Key key = key(fields);
        return new Hashing(
                key.by(),
                key.name(),
                table,
                fields.read("points", POINTS, Hashing.USUAL.points()),
                fields.read("size", SIZE, Hashing.USUAL.size()),
                fields.read("bound", Shares.WHOLE_OR_MORE, 0.0));
    }

    private Key key(Fields fields) {
        if (!(fields.node("by") instanceof Node.Entries)) {
            String word = fields.need("by", BY, "client");
            return word.equals("path") ? new Key(Hashing.By.PATH, null) : CLIENT;
        }
        Fields by = fields.map("by", Keys.HASH_BY);
        if (by.given().size() != 1) {
            if (!by.odd()) {
                problems.add(fields.valuePlace("by"), "one thing is hashed", "write one of header and cookie");
            }
            return CLIENT;
        }
        String header = by.read("header", Names.TOKEN);
        String cookie = by.read("cookie", Names.TOKEN);
        if (header != null) {
            return new Key(Hashing.By.HEADER, header);
        }
        return cookie == null ? CLIENT : new Key(Hashing.By.COOKIE, cookie);
    }

    private record Key(Hashing.By by, @Nullable String name) {}

    private void checkOf(Fields fields, String key, Hashing.Table of, Hashing.Table table) {
        if (fields.has(key) && table != of) {
            problems.add(fields.keyPlace(key), key + " is of table: " + of.word(), "leave it out, or write that table");
        }
    }

    private static boolean isPrime(int number) {
        if (number < 3 || number > 10_000_000 || number % 2 == 0) {
            return false;
        }
        for (int divisor = 3; divisor * divisor <= number; divisor += 2) {
            if (number % divisor == 0) {
                return false;
            }
        }
        return true;
    }
}
