import { ChannelContentJoin, type ChannelContent, type ChannelContentSettings } from './channel-content.ts';
import type { ChannelPart } from './channel-pass.ts';
import { joinChannelCourse, type ChannelCourse, type CoursePlan } from './course.ts';
import { joinDropouts } from './dropouts.ts';
import { joinLevels } from './levels.ts';
import {
  LongFrameStatistics,
  type LongFrameResult,
  type LongFrameStatisticsSettings,
} from './long-frame-statistics.ts';
import type { ChannelFacts } from './quality.ts';

export interface ChannelResult extends LongFrameResult {
  facts: ChannelFacts;
  course: ChannelCourse;
  content: ChannelContent;
}

export interface ChannelJoinSettings extends LongFrameStatisticsSettings {
  channel: number;
  course: CoursePlan;
  content: ChannelContentSettings;
}

type SmallParts = Omit<ChannelPart, 'longFrames' | 'content'>;

/** Joins the segments of a channel, one after the other; the large tables are added up as they come. */
export class ChannelJoin {
  readonly #settings: ChannelJoinSettings;
  readonly #statistics: LongFrameStatistics;
  readonly #content: ChannelContentJoin;
  readonly #parts: SmallParts[] = [];

  constructor(settings: ChannelJoinSettings) {
    this.#settings = settings;
    this.#statistics = new LongFrameStatistics(settings);
    this.#content = new ChannelContentJoin(settings.content);
  }

  /** Parts in order of their segments. */
  add({ longFrames, content, ...small }: ChannelPart): void {
    this.#statistics.absorb(longFrames);
    this.#content.add(content);
    this.#parts.push(small);
  }

  finish(): ChannelResult {
    const { channel, course, sampleRateHz } = this.#settings;
    const content = this.#content.finish();
    const each = <Part>(of: (part: SmallParts) => Part) => this.#parts.map(of);
    const nonFiniteSamples = this.#parts.reduce((sum, part) => sum + part.nonFiniteSamples, 0);
    const { levels, clipped } = joinLevels(
      channel,
      each((part) => part.levels),
      nonFiniteSamples,
    );
    return {
      ...this.#statistics.finish(),
      content,
      facts: {
        levels,
        clipped,
        dropouts: joinDropouts(
          each((part) => part.dropouts),
          sampleRateHz,
        ),
        mains: content.mains,
      },
      course: joinChannelCourse(
        course,
        each((part) => part.course),
      ),
    };
  }
}
