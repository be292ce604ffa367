package backcone.engine.eval;

import backcone.engine.graph.DriveGraph;
import org.jspecify.annotations.Nullable;

/** The values of a graph for the numbers as written, and for other loads, readings or numbers. */
public final class Run {
    public final DriveGraph graph;
    private final double[] inputs;
    private final double[] value;

    public Run(DriveGraph graph) {
        this.graph = graph;
        this.inputs = graph.inputValues();
        this.value = new Evaluator(graph.tape()).run(1, inputs).clone();
    }

    public double at(int register) {
        return register < 0 ? Double.NaN : value[register];
    }

    public double[] values() {
        return value;
    }

    public Faults faults() {
        return new Faults(graph.tape(), value);
    }

    /** The value of one register with the load multiplied by a factor. */
    public final class Scaled {
        private final Evaluator evaluator = new Evaluator(graph.tape());

        public double[] at(double load) {
            return evaluator.run(load, inputs);
        }
    }

    public Scaled scaled() {
        return new Scaled();
    }

    /** All registers with one input replaced. */
    public double[] with(int input, double v) {
        double[] other = inputs.clone();
        other[input] = v;
        return new Evaluator(graph.tape()).run(1, other).clone();
    }

    /** Whether load acts on a register at all. */
    public boolean loadActsOn(int register) {
        int load = graph.loadRegister();
        return load >= 0 && register >= 0 && graph.tape().depends(register, load);
    }

    public double @Nullable [] inputs() {
        return inputs;
    }
}
