/** How to check an archive with what every Linux machine has. */
export function verifyExample(baseName: string): string {
  return [
    `sha256sum -c ${baseName}.zip.sha256`,
    `unzip -q ${baseName}.zip && cd ${baseName}`,
    'sha256sum -c manifest-sha256.txt tagmanifest-sha256.txt',
    'sha512sum -c manifest-sha512.txt tagmanifest-sha512.txt',
  ].join('\n');
}

/** Runs inside the unpacked folder with the standard library alone. */
export const loadExample = `import csv, wave

with open("data/labels/events.csv", encoding="utf-8", newline="") as file:
    events = list(csv.DictReader(file))

for event in events[:10]:
    if not event["file_name"].endswith(".wav"):
        continue  # FLAC needs a library, other files the layout that data/metadata.csv tells
    start, end = int(event["start_sample"]), int(event["end_sample"])
    with wave.open("data/" + event["file_name"]) as audio:
        audio.setpos(start)
        raw = audio.readframes(end - start)
    print(event["file_name"], event["start_s"], event["class"], event["confidence"], len(raw), "bytes")`;

export const pandasExample = `import pandas as pd
import soundfile as sf

events = pd.read_csv("data/labels/events.csv").merge(
    pd.read_csv("data/metadata.csv")[["file_name", "sample_rate_hz"]], on="file_name")
event = events.iloc[0]
samples, header_rate = sf.read("data/" + event["file_name"], always_2d=True,
                               start=event["start_sample"], stop=event["end_sample"])
burst = samples[:, event["channel"]]   # one channel, full scale = 1, event["sample_rate_hz"] samples per second`;
