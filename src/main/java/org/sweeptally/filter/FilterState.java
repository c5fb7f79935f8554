package org.sweeptally.filter;

import java.io.DataInput;
import java.io.DataOutput;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.sweeptally.model.Gaussian;

/** The bytes of a filter's state: every double as its 64 bits, lists with their lengths first. */
final class FilterState {

    private FilterState() {}

    static void write(DataOutput out, List<Component> components, Unseen unseen, Counters counters)
            throws IOException {
        out.writeInt(components.size());
        for (Component component : components) {
            writeHistory(out, component.history);
            writeDensity(out, component.density);
            out.writeDouble(component.logOdds);
            out.writeBoolean(component.confirmed);
            writeUses(out, component.used);
        }
        out.writeInt(unseen.terms().size());
        for (UnseenTerm term : unseen.terms()) {
            writeHistory(out, term.tag);
            writeDensity(out, term.density);
            out.writeDouble(term.weight);
        }
        unseen.grid().write(out);
        counters.write(out);
    }

    static void read(DataInput in, List<Component> components, Unseen unseen, Counters counters) throws IOException {
        int size = in.readInt();
        for (int i = 0; i < size; i++) {
            components.add(new Component(
                    readHistory(in), readDensity(in), in.readDouble(), in.readBoolean(), readUses(in)));
        }
        int terms = in.readInt();
        for (int i = 0; i < terms; i++) {
            ObjectHistory tag = readHistory(in);
            Gaussian density = readDensity(in);
            unseen.terms().add(new UnseenTerm(in.readDouble(), density, tag));
        }
        unseen.grid().read(in);
        counters.read(in);
    }

    private static void writeHistory(DataOutput out, ObjectHistory history) throws IOException {
        writeText(out, history.identity().sensor());
        out.writeLong(history.identity().scanTimeMicros());
        out.writeInt(history.identity().part());
        out.writeInt(history.identity().index());
        out.writeLong(history.firstSeenMicros());
        out.writeLong(history.lastDetectedMicros());
        out.writeBoolean(history.bornBefore());
        writeText(out, history.declared());
        out.writeDouble(history.declaredProbability());
    }

    private static ObjectHistory readHistory(DataInput in) throws IOException {
        Identity identity = new Identity(readText(in), in.readLong(), in.readInt(), in.readInt());
        return new ObjectHistory(
                identity, in.readLong(), in.readLong(), in.readBoolean(), readText(in), in.readDouble());
    }

    private static void writeDensity(DataOutput out, Gaussian density) throws IOException {
        DMatrix4 x = density.mean;
        DMatrix4x4 p = density.covariance;
        double[] numbers = {
            x.a1, x.a2, x.a3, x.a4, p.a11, p.a12, p.a13, p.a14, p.a22, p.a23, p.a24, p.a33, p.a34, p.a44
        };
        for (double number : numbers) {
            out.writeDouble(number);
        }
    }

    private static Gaussian readDensity(DataInput in) throws IOException {
        double[] n = new double[14];
        for (int i = 0; i < n.length; i++) {
            n[i] = in.readDouble();
        }
        return new Gaussian(
                new DMatrix4(n[0], n[1], n[2], n[3]),
                new DMatrix4x4(
                        n[4], n[5], n[6], n[7],
                        n[5], n[8], n[9], n[10],
                        n[6], n[9], n[11], n[12],
                        n[7], n[10], n[12], n[13]));
    }

    private static void writeUses(DataOutput out, List<Component.Use> uses) throws IOException {
        out.writeInt(uses.size());
        for (Component.Use use : uses) {
            out.writeInt(use.part());
            out.writeInt(use.index());
            writeText(out, use.id());
            out.writeDouble(use.probability());
        }
    }

    private static List<Component.Use> readUses(DataInput in) throws IOException {
        int size = in.readInt();
        List<Component.Use> uses = new ArrayList<>(size);
        for (int i = 0; i < size; i++) {
            uses.add(new Component.Use(in.readInt(), in.readInt(), readText(in), in.readDouble()));
        }
        return List.copyOf(uses);
    }

    private static void writeText(DataOutput out, String text) throws IOException {
        byte[] bytes = text == null ? null : text.getBytes(StandardCharsets.UTF_8);
        out.writeInt(bytes == null ? -1 : bytes.length);
        if (bytes != null) {
            out.write(bytes);
        }
    }

    private static String readText(DataInput in) throws IOException {
        int length = in.readInt();
        if (length < 0) {
            return null;
        }
        byte[] bytes = new byte[length];
        in.readFully(bytes);
        return new String(bytes, StandardCharsets.UTF_8);
    }
}
