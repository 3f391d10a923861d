package steelyard.balancer.core.decide;

/** Where the core's draws come from: each is made by key, so that no order of calls changes it. */
@FunctionalInterface
public interface Chance {
    /** The point of the probe period at which a backend's first probe starts: uniform in [0, 1), drawn once. */
    double probePhase(int backend);
}
