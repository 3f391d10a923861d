package steelyard.balancer.live;

/** On which loopback ports the fronts listen. Asked once for each pool at the start. */
@FunctionalInterface
public interface FrontPorts {
    /** The port of a pool's front by the pool's number, or 0 for any that is free. */
    int of(int pool);
}
