package steelyard.drills.read;

import java.math.BigDecimal;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** Sizes of bodies, in bytes. */
final class Sizes {
    private static final int MOST = 16 << 20;
    private static final List<String> UNITS = List.of("MiB", "KiB", "B");
    private static final int[] BYTES = {1 << 20, 1 << 10, 1};

    static final Quantity<Integer> SIZE = Quantity.of("a size", "512B, 4KiB or 1MiB", Sizes::bytes)
            .withUnits(List.of("B", "KiB", "MiB"))
            .that(n -> n >= 0, "is out of range", "write a size from 0B to 16MiB");

    private Sizes() {}

    /** Bytes; -1 for a size out of range; null for no size. */
    private static @Nullable Integer bytes(String text) {
        for (int i = 0; i < BYTES.length; i++) {
            String unit = UNITS.get(i);
            if (text.endsWith(unit)) {
                BigDecimal number = Numbers.decimal(
                        text.substring(0, text.length() - unit.length()).strip());
                return number == null ? null : Integer.valueOf(whole(number.doubleValue() * BYTES[i]));
            }
        }
        return null;
    }

    private static int whole(double bytes) {
        return bytes < 0 || bytes > MOST ? -1 : (int) Math.round(bytes);
    }
}
