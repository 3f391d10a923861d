package steelyard.balancer.core.pick;

/** What methods that draw lots share: an urn that follows the members' weights. */
abstract class LotsPicker extends CountingPicker {
    private final Urn urn;

    LotsPicker(int members, Lots lots) {
        super(members);
        urn = new Urn(members, lots);
    }

    /** Draws by weight among those not tried. */
    final int draw(long request, int attempt, int[] tried, int triedCount) {
        return urn.draw(request, attempt, 0, tried, triedCount, NOBODY);
    }

    /** Draws by weight, with lots of its own, among those neither tried nor drawn first. */
    final int drawSecond(long request, int attempt, int[] tried, int triedCount, int first) {
        return urn.draw(request, attempt, Urn.LOTS, tried, triedCount, first);
    }

    @Override
    void changed(int member) {
        urn.put(member, isIn(member) ? weight[member] : 0);
    }
}
