package steelyard.contract;

import steelyard.drills.model.Drill;
import steelyard.harness.stage.Stage;
import steelyard.harness.stage.virtual.Transport;
import steelyard.harness.stage.virtual.VirtualStage;

class VirtualStageTest extends StageContract {
    @Override
    protected Stage stage(Drill drill, long seed) {
        return new VirtualStage(drill, seed, Transport.USUAL);
    }
}
