package steelyard.harness.stage.virtual;

import java.lang.reflect.InvocationHandler;
import java.lang.reflect.Proxy;
import java.util.ArrayDeque;
import java.util.Arrays;
import steelyard.backends.behave.Chance;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillLibrary;
import steelyard.drills.read.DrillReader;
import steelyard.harness.conduct.Conductor;
import steelyard.harness.record.PlayListener;
import steelyard.harness.record.Sample;
import steelyard.harness.stage.CannotPlay;

/** Everything that a play tells, as one text: every event with all that it carries, in order. */
final class Told {
    private Told() {}

    static Drill bundled(String name) {
        return DrillReader.read(name, DrillLibrary.text(name).orElseThrow())
                .value()
                .orElseThrow();
    }

    static String by(Drill drill, long seed) {
        StringBuilder text = new StringBuilder();
        InvocationHandler write = (proxy, method, arguments) -> {
            text.append(method.getName());
            for (Object each : arguments) {
                text.append(' ').append(each instanceof Sample sample ? text(sample) : String.valueOf(each));
            }
            text.append('\n');
            return null;
        };
        PlayListener listener = (PlayListener)
                Proxy.newProxyInstance(Told.class.getClassLoader(), new Class<?>[] {PlayListener.class}, write);
        try (VirtualStage stage = new VirtualStage(drill, seed, Transport.USUAL)) {
            stage.open(listener);
            stage.play(new Conductor(drill, new Chance(seed), new ArrayDeque<>()));
        } catch (CannotPlay e) {
            throw new AssertionError(e);
        }
        return text.toString();
    }

    private static String text(Sample sample) {
        return Arrays.toString(sample.inFlight)
                + Arrays.toString(sample.standing)
                + Arrays.toString(sample.setWeight)
                + Arrays.toString(sample.effectiveWeight)
                + Arrays.toString(sample.entitledShare)
                + Arrays.toString(sample.waiting)
                + Arrays.toString(sample.inService)
                + Arrays.toString(sample.busyNanos);
    }
}
