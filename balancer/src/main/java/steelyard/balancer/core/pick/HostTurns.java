package steelyard.balancer.core.pick;

/**
 * Weighted round robin over hosts, then within the host over the pool's own members there.
 *
 * <p>The hosts' places are shared with the other pools of the instance ({@link HostPlaces}); a pool looks only at hosts on
 * which it has a member that may be picked. Within the host the members' own weights count, by the same rule. When every
 * member that a host could offer is warming and lets its turn pass, the host's turn passes unserved and the pick goes on to
 * the next host.
 */
public final class HostTurns implements Picker, Tournament.Order {
    private final HostPlaces places;
    private final int[] hostOf;
    private final int[] seatOf;
    private final int[][] memberAt;
    private final WeightedRoundRobin[] onHost;
    private final Tournament hosts;
    private final int[] asked;

    /**
     * @param places shared by all pools of the instance
     * @param hostOf the host of each member
     */
    public HostTurns(HostPlaces places, int[] hostOf, Ramp ramp) {
        this.places = places;
        this.hostOf = hostOf.clone();
        seatOf = new int[hostOf.length];
        asked = new int[hostOf.length];
        memberAt = seats(places.hosts());
        onHost = new WeightedRoundRobin[places.hosts()];
        for (int host = 0; host < onHost.length; host++) {
            int[] here = memberAt[host];
            onHost[host] = new WeightedRoundRobin(here.length, (seat, nowNanos) -> ramp.fraction(here[seat], nowNanos));
        }
        hosts = new Tournament(places.hosts(), this);
        places.join(this);
    }

    /** Seats the members of each host in list order. */
    private int[][] seats(int hostCount) {
        int[] membersOn = new int[hostCount];
        for (int member = 0; member < hostOf.length; member++) {
            seatOf[member] = membersOn[hostOf[member]]++;
        }
        int[][] seats = new int[hostCount][];
        for (int host = 0; host < hostCount; host++) {
            seats[host] = new int[membersOn[host]];
        }
        for (int member = 0; member < hostOf.length; member++) {
            seats[hostOf[member]][seatOf[member]] = member;
        }
        return seats;
    }

    @Override
    public boolean beats(int challenger, int holder) {
        return places.turns.before(challenger, holder);
    }

    @Override
    public int pick(long request, int attempt, long key, int[] tried, int triedCount, long nowNanos) {
        for (int i = 0; i < triedCount; i++) {
            int host = hostOf[tried[i]];
            onHost[host].hide(seatOf[tried[i]]);
            if (onHost[host].isEmpty()) {
                hosts.leave(host);
            }
        }
        int picked = next(nowNanos);
        for (int i = 0; i < triedCount; i++) {
            int host = hostOf[tried[i]];
            onHost[host].show(seatOf[tried[i]]);
            if (belongs(host) && !hosts.has(host)) {
                hosts.enter(host);
            }
        }
        return picked;
    }

    private int next(long nowNanos) {
        while (true) {
            int host = hosts.best();
            if (host == NOBODY) {
                return NOBODY;
            }
            places.take(host);
            int seat = onHost[host].nextOfGroup(asked, nowNanos);
            if (seat != NOBODY) {
                return memberAt[host][seat];
            }
        }
    }

    @Override
    public void enter(int member) {
        onHost[hostOf[member]].enter(seatOf[member]);
        settle(hostOf[member]);
    }

    @Override
    public void leave(int member) {
        onHost[hostOf[member]].leave(seatOf[member]);
        settle(hostOf[member]);
    }

    @Override
    public void weigh(int member, long weightMilli) {
        onHost[hostOf[member]].weigh(seatOf[member], weightMilli);
        settle(hostOf[member]);
    }

    @Override
    public boolean takesTurns() {
        return true;
    }

    /** The shared place of a host has moved. */
    void hostMoved(int host) {
        hosts.changed(host);
    }

    /** The weight of a host has changed; its place may no longer be before everybody else's. */
    void hostWeighed(int host) {
        hosts.leave(host);
        settle(host);
    }

    private boolean belongs(int host) {
        return places.turns.weight(host) > 0 && !onHost[host].isEmpty();
    }

    private void settle(int host) {
        boolean in = hosts.has(host);
        if (belongs(host) && !in) {
            join(host);
            hosts.enter(host);
        } else if (!belongs(host) && in) {
            hosts.leave(host);
        }
    }

    private void join(int host) {
        int first = hosts.best();
        if (first != NOBODY) {
            places.turns.join(host, first);
            places.moved(host);
        }
    }
}
