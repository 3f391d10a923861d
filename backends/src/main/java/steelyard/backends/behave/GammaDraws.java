package steelyard.backends.behave;

/**
 * Gamma draws by key: Marsaglia and Tsang, "A simple method for generating gamma variables", ACM Transactions on
 * Mathematical Software 26 (2000). A normal draw is bent into a candidate, which a uniform draw accepts or rejects; what a
 * rejected one used is skipped, and the next candidate is made of further draws of the same key. For a shape below 1 the draw
 * is that of shape + 1 times a power of one more uniform (their section 6).
 */
final class GammaDraws {

    /**
     * Draws of one key lie this far apart in the second key number: above every attempt, every backend number and what
     * {@link RouteDelay} adds to them.
     */
    private static final long APART = 1L << 33;

    /** More than 95 of 100 candidates are accepted, so a further one is needed with a chance below 1e-80. */
    private static final int MOST_CANDIDATES = 64;

    private GammaDraws() {}

    /** A draw of the gamma law with this shape, above 0, and scale 1. */
    static double draw(double shape, Chance chance, long request, int attempt) {
        if (shape < 1) {
            double power = StrictMath.pow(chance.positiveUnit(Stream.SERVICE, request, attempt - APART), 1 / shape);
            return draw(shape + 1, chance, request, attempt) * power;
        }
        double d = shape - 1.0 / 3;
        double c = 1 / StrictMath.sqrt(9 * d);
        for (int candidate = 0; candidate < MOST_CANDIDATES; candidate++) {
            double normal = chance.normal(Stream.SERVICE, request, attempt + 2 * candidate * APART);
            double unit = chance.positiveUnit(Stream.SERVICE, request, attempt + (2 * candidate + 1) * APART);
            double root = 1 + c * normal;
            double v = root * root * root;
            if (root > 0 && StrictMath.log(unit) < 0.5 * normal * normal + d * (1 - v + StrictMath.log(v))) {
                return d * v;
            }
        }
        return d;
    }
}
