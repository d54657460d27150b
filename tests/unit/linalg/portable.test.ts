import { portable } from '../../../server/linalg/portable.ts';
import { conformance } from './conformance.ts';

conformance(portable);
