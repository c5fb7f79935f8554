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

    static void write(
            DataOutput out, List<Component> components, Unseen unseen, ClutterMap clutterMap, Counters counters)
            throws IOException {
        out.writeInt(components.size());
        for (Component component : components) {
            writeHistory(out, component.history);
            writeBank(out, component.bank);
            writeDetectability(out, component.detectability);
            out.writeDouble(component.logOdds);
            out.writeBoolean(component.confirmed);
            out.writeDouble(component.moving);
            out.writeBoolean(component.movingShown);
            writeLineage(out, component.lineage);
            writeUses(out, component.used);
        }
        out.writeInt(unseen.terms().size());
        for (UnseenTerm term : unseen.terms()) {
            writeHistory(out, term.tag);
            writeBank(out, term.bank);
            writeDetectability(out, term.detectability);
            out.writeDouble(term.weight);
        }
        for (UnseenGrid grid : unseen.grids()) {
            grid.write(out);
        }
        clutterMap.write(out);
        counters.write(out);
    }

    static void read(
            DataInput in,
            int modes,
            List<Component> components,
            Unseen unseen,
            ClutterMap clutterMap,
            Counters counters)
            throws IOException {
        int size = in.readInt();
        for (int i = 0; i < size; i++) {
            components.add(readComponent(in, modes));
        }
        int terms = in.readInt();
        for (int i = 0; i < terms; i++) {
            ObjectHistory tag = readHistory(in);
            Bank bank = readBank(in, modes);
            Detectability detectability = readDetectability(in);
            unseen.terms().add(new UnseenTerm(in.readDouble(), bank, detectability, tag));
        }
        for (UnseenGrid grid : unseen.grids()) {
            grid.read(in);
        }
        clutterMap.read(in);
        counters.read(in);
    }

    private static Component readComponent(DataInput in, int modes) throws IOException {
        ObjectHistory history = readHistory(in);
        Bank bank = readBank(in, modes);
        Detectability detectability = readDetectability(in);
        double logOdds = in.readDouble();
        boolean confirmed = in.readBoolean();
        double moving = in.readDouble();
        boolean movingShown = in.readBoolean();
        Lineage lineage = readLineage(in);
        Component component = new Component(history, bank, detectability, logOdds, confirmed, readUses(in));
        component.moving = moving;
        component.movingShown = movingShown;
        component.lineage = lineage;
        return component;
    }

    private static void writeBank(DataOutput out, Bank bank) throws IOException {
        for (int m = 0; m < bank.modes(); m++) {
            out.writeDouble(bank.weights[m]);
            if (bank.weights[m] > 0) {
                writeDensity(out, bank.densities[m]);
            }
        }
    }

    private static Bank readBank(DataInput in, int modes) throws IOException {
        double[] weights = new double[modes];
        Gaussian[] densities = new Gaussian[modes];
        for (int m = 0; m < modes; m++) {
            weights[m] = in.readDouble();
            densities[m] = weights[m] > 0 ? readDensity(in) : null;
        }
        return new Bank(weights, densities);
    }

    private static void writeDetectability(DataOutput out, Detectability detectability) throws IOException {
        out.writeInt(detectability.size());
        for (int i = 0; i < detectability.size(); i++) {
            writeText(out, detectability.sensor(i));
            out.writeDouble(detectability.probability(i));
            out.writeLong(detectability.timeMicros(i));
        }
    }

    private static Detectability readDetectability(DataInput in) throws IOException {
        Detectability detectability = Detectability.UNKNOWN;
        int size = in.readInt();
        for (int i = 0; i < size; i++) {
            detectability = detectability.with(readText(in), in.readDouble(), in.readLong());
        }
        return detectability;
    }

    private static void writeLineage(DataOutput out, Lineage lineage) throws IOException {
        out.writeInt(lineage == null ? -1 : lineage.shares().size());
        if (lineage != null) {
            for (Lineage.Share share : lineage.shares()) {
                writeIdentity(out, share.identity());
                out.writeDouble(share.probability());
            }
        }
    }

    private static Lineage readLineage(DataInput in) throws IOException {
        int size = in.readInt();
        if (size < 0) {
            return null;
        }
        List<Lineage.Share> shares = new ArrayList<>();
        for (int i = 0; i < size; i++) {
            shares.add(new Lineage.Share(readIdentity(in), in.readDouble()));
        }
        return new Lineage(shares);
    }

    private static void writeIdentity(DataOutput out, Identity identity) throws IOException {
        writeText(out, identity.sensor());
        out.writeLong(identity.scanTimeMicros());
        out.writeInt(identity.part());
        out.writeInt(identity.index());
    }

    private static Identity readIdentity(DataInput in) throws IOException {
        return new Identity(readText(in), in.readLong(), in.readInt(), in.readInt());
    }

    private static void writeHistory(DataOutput out, ObjectHistory history) throws IOException {
        writeIdentity(out, history.identity());
        out.writeLong(history.firstSeenMicros());
        out.writeLong(history.lastDetectedMicros());
        out.writeBoolean(history.bornBefore());
        writeText(out, history.declared());
        out.writeDouble(history.declaredProbability());
    }

    private static ObjectHistory readHistory(DataInput in) throws IOException {
        Identity identity = readIdentity(in);
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
