package backcone.engine.eval;

import backcone.engine.graph.DriveGraph;
import org.jspecify.annotations.Nullable;

/** The values of a graph for the numbers as written, and for other loads, readings or numbers. */
public final class Run {
    public final DriveGraph graph;
    private final double[] inputs;
    private final double[] value;
    private final java.util.Map<String, double[]> others = new java.util.HashMap<>();

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

    /** One register as a function of the factor on the load; only what changes with the load is computed again. */
    public java.util.function.DoubleUnaryOperator underLoad(int register) {
        Evaluator e = new Evaluator(graph.tape(), value, register, graph.loadRegister());
        return load -> e.run(load, inputs)[register];
    }

    /** All registers with one input replaced; asked again for the same input, the answer is kept. */
    public double[] with(int input, double v) {
        return others.computeIfAbsent(input + "=" + v, k -> {
            double[] other = inputs.clone();
            other[input] = v;
            return new Evaluator(graph.tape()).run(1, other).clone();
        });
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
